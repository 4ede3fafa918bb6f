import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { solveBounded } from './simplex.ts';

function solve(objective: number[], rows: number[][], right: number[], upper: number[]) {
  const program = {
    objective: Float64Array.from(objective),
    matrix: Float64Array.from(rows.flat()),
    right: Float64Array.from(right),
    upper: Float64Array.from(upper),
  };
  const { x, duals } = solveBounded(program);
  return { x: [...x], duals, value: objective.reduce((sum, c, j) => sum + c * (x[j] as number), 0) };
}

/** Any π ≥ 0 gives π·b + Σ u·max(0, c − π·A) ≥ the optimum. */
function dualValue(objective: number[], rows: number[][], right: number[], upper: number[], duals: Float64Array) {
  const rest = objective.map((c, j) => c - rows.reduce((sum, row, i) => sum + (duals[i] as number) * (row[j] ?? 0), 0));
  return (
    right.reduce((sum, b, i) => sum + (duals[i] as number) * b, 0) +
    rest.reduce((sum, r, j) => sum + Math.max(0, r) * (upper[j] as number), 0)
  );
}

describe('the simplex', () => {
  test('solves the cube of Klee and Minty in three dimensions', () => {
    // V. Klee, G. J. Minty 1972, in the form of textbooks (from memory): optimum 10,000 at (0, 0, 10,000).
    const rows = [
      [1, 0, 0],
      [20, 1, 0],
      [200, 20, 1],
    ];
    const { x, value } = solve([100, 10, 1], rows, [1, 100, 10_000], [Infinity, Infinity, Infinity]);
    expect(value).toBeCloseTo(10_000, 6);
    expect(x[2]).toBeCloseTo(10_000, 6);
  });

  test('keeps to the upper bounds', () => {
    const { x } = solve([3, 2], [[1, 1]], [4], [3, 10]);
    expect(x).toEqual([3, 1]);
  });

  test('reaches a condition that nothing taken would break', () => {
    // x + y ≥ 2, the dearer of the two is not taken.
    const { x } = solve([-1, -3], [[-1, -1]], [-2], [5, 5]);
    expect(x).toEqual([2, 0]);
  });

  test('finds an optimum that its own multipliers prove', () => {
    const cell = fc.integer({ min: 0, max: 20 });
    const size = { minLength: 4, maxLength: 4 };
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: -5, max: 20 }), size),
        fc.array(fc.array(cell, size), { minLength: 1, maxLength: 5 }),
        fc.array(fc.integer({ min: 0, max: 100 }), { minLength: 5, maxLength: 5 }),
        fc.array(fc.integer({ min: 0, max: 30 }), size),
        (objective, rows, rights, upper) => {
          const right = rights.slice(0, rows.length);
          const { x, value, duals } = solve(objective, rows, right, upper);
          x.forEach((mass, j) => {
            expect(mass).toBeGreaterThanOrEqual(-1e-7);
            expect(mass).toBeLessThanOrEqual((upper[j] as number) + 1e-7);
          });
          rows.forEach((row, i) => {
            expect(row.reduce((sum, a, j) => sum + a * (x[j] as number), 0)).toBeLessThanOrEqual(
              (right[i] as number) + 1e-6,
            );
          });
          expect(dualValue(objective, rows, right, upper, duals)).toBeCloseTo(value, 5);
        },
      ),
    );
  });
});
