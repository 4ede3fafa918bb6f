import { describe, expect, test } from 'vitest';
import { askHighs } from '#scripts/bench/ask-highs.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { DualSimplex } from '#domain/dual-simplex.ts';
import type { BoxedProgram } from '#domain/tableau.ts';

function anyProgram(random: Random): BoxedProgram {
  const [rows, columns] = [random.int(1, 5), random.int(1, 8)];
  const some = (length: number, value: () => number) => Float64Array.from({ length }, value);
  const lower = some(columns + rows, () => random.int(-3, 0));
  return {
    matrix: some(rows * columns, () => (random.next() < 0.3 ? 0 : random.int(-5, 9))),
    right: some(rows, () => random.int(-4, 20)),
    gains: some(columns, () => random.int(-3, 6)),
    lower,
    upper: lower.map((least) => least + random.int(0, 12)),
  };
}

/** The same in CPLEX's LP text, with bounds changed: x are the columns, s the slacks. */
function lpText({ matrix, right, gains, lower, upper }: BoxedProgram): string {
  const n = gains.length;
  const name = (v: number) => (v < n ? `x${v}` : `s${v - n}`);
  const term = (value: number, v: number) => `${value < 0 ? '-' : '+'} ${Math.abs(value)} ${name(v)}`;
  const rows = [...right].map((b, r) => {
    const terms = [...gains].map((_, k) => term(matrix[r * n + k] ?? 0, k));
    return ` c${r}: ${terms.join(' ')} + s${r} = ${b}`;
  });
  return [
    `Maximize\n obj: ${[...gains].map(term).join(' ')}`,
    `Subject To\n${rows.join('\n')}`,
    `Bounds\n${[...lower].map((least, v) => ` ${least} <= ${name(v)} <= ${upper[v]}`).join('\n')}`,
    'End',
  ].join('\n');
}

/** Weak duality by hand: π·b + Σ of the better end of each range. */
function boundOf(program: BoxedProgram, multipliers: readonly number[]): number {
  const { matrix, right, gains, lower, upper } = program;
  const n = gains.length;
  let bound = multipliers.reduce((sum, pi, r) => sum + pi * (right[r] ?? 0), 0);
  lower.forEach((least, v) => {
    const cost =
      v < n
        ? multipliers.reduce((sum, pi, r) => sum - pi * (matrix[r * n + v] ?? 0), gains[v] ?? 0)
        : -(multipliers[v - n] ?? 0);
    bound += Math.max(cost * least, cost * (upper[v] ?? 0));
  });
  return bound;
}

async function expectOptimum(simplex: DualSimplex, program: BoxedProgram): Promise<'optimal' | 'infeasible' | 'cut'> {
  const outcome = simplex.solve();
  const { feasible, objective } = await askHighs(lpText(program), 10);
  expect(outcome).toBe(feasible ? 'optimal' : 'infeasible');
  const n = program.gains.length;
  const multipliers = [...program.right].map((_, r) => simplex.multiplier(n + r));
  if (feasible) {
    expect(simplex.objective).toBeCloseTo(objective, 6);
    expect(boundOf(program, multipliers)).toBeCloseTo(objective, 6);
  } else {
    const far = multipliers.map((pi, r) => pi + 1e6 * simplex.ray(n + r));
    expect(boundOf(program, far)).toBeLessThan(boundOf(program, multipliers) - 1);
  }
  return outcome;
}

describe('the dual simplex', () => {
  test('finds the optimum that HiGHS finds, and goes on to it when bounds change', async () => {
    const counts = { optimal: 0, infeasible: 0, cut: 0 };
    for (let seed = 1; seed <= 150; seed++) {
      const random = seededRandom(seed);
      const program = anyProgram(random);
      const simplex = new DualSimplex(program);
      counts[await expectOptimum(simplex, program)] += 1;
      const again = new DualSimplex(simplex);
      for (let change = 0; change < 3; change++) {
        const v = random.int(0, program.lower.length - 1);
        // Only ever narrowed, as decisions do: a variable with one value left is settled for good.
        const [least, most] = [program.lower[v] ?? 0, program.upper[v] ?? 0];
        const [a, b] = [random.int(least, most), random.int(least, most)];
        program.lower[v] = Math.min(a, b);
        program.upper[v] = Math.max(a, b);
        again.setBounds(v, Math.min(a, b), Math.max(a, b));
      }
      counts[await expectOptimum(again, program)] += 1;
    }
    expect(counts.optimal).toBeGreaterThan(80);
    expect(counts.infeasible).toBeGreaterThan(40);
  });

  test('a variant of a column, without its entry in one row, counts from then on', async () => {
    for (let seed = 1; seed <= 60; seed++) {
      const random = seededRandom(seed + 500);
      const program = anyProgram(random);
      const n = program.gains.length;
      const rows = program.right.length;
      const row = random.int(0, rows - 1);
      const entry = program.matrix[row * n] ?? 0;
      const simplex = new DualSimplex(program, 1);
      simplex.solve();
      simplex.addVariant(n + rows, 0, { slack: n + row, entry }, 2);
      simplex.setBounds(0, 0, 0);
      simplex.setBounds(n + rows, 1, 4);
      program.lower[0] = 1;
      program.upper[0] = 4;
      program.matrix[row * n] = 0;
      program.gains[0] = (program.gains[0] ?? 0) + 2;
      const { feasible, objective } = await askHighs(lpText(program), 10);
      expect(simplex.solve()).toBe(feasible ? 'optimal' : 'infeasible');
      if (feasible) expect(simplex.objective).toBeCloseTo(objective, 6);
    }
  });

  test('stops below a cutoff with an objective that is a bound all the same', () => {
    const program: BoxedProgram = {
      matrix: Float64Array.of(1, 1),
      right: Float64Array.of(10),
      gains: Float64Array.of(3, 2),
      lower: Float64Array.of(0, 0, 0),
      upper: Float64Array.of(8, 8, 10),
    };
    // 8 of the first and 2 of the second: 28.
    const simplex = new DualSimplex(program);
    expect(simplex.solve(41)).toBe('cut');
    expect(simplex.objective).toBeGreaterThanOrEqual(28);
    expect(simplex.solve()).toBe('optimal');
    expect(simplex.objective).toBeCloseTo(28, 9);
    expect([simplex.value(0), simplex.value(1)]).toEqual([8, 2]);
  });
});
