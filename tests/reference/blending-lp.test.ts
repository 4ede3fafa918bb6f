import { expect, test } from 'vitest';
import { DualSimplex } from '#domain/dual-simplex.ts';

/**
 * "Food Manufacture 1", H. P. Williams, Model Building in Mathematical Programming: buy, store and blend five oils over
 * six months. Data from memory; the optimum, 107842.59, stands in public test suites (read).
 */
const PRICES = [
  [110, 120, 130, 110, 115],
  [130, 130, 110, 90, 115],
  [110, 140, 130, 100, 95],
  [120, 110, 120, 120, 125],
  [100, 120, 150, 110, 105],
  [90, 100, 140, 80, 135],
];
const HARDNESS = [8.8, 6.1, 2.0, 4.2, 5.0];
const OPTIMUM = 107842.59;
const [MONTHS, OILS] = [6, 5];
/** tons of vegetable oils (the first two) and of the others that can be refined a month, and that a tank holds. */
const [VEGETABLE, OTHER, TANK] = [200, 250, 1000];

interface Line {
  terms: readonly [column: number, factor: number][];
  right: number;
  slack: [least: number, most: number];
}

function foodManufacture() {
  const buy = (m: number, o: number) => m * OILS + o;
  const use = (m: number, o: number) => MONTHS * OILS + buy(m, o);
  const store = (m: number, o: number) => 2 * MONTHS * OILS + buy(m, o);
  const lines: Line[] = [];
  const oils = [...HARDNESS.keys()];
  for (let m = 0; m < MONTHS; m++) {
    for (const o of oils) {
      const left: Line['terms'] = m === 0 ? [] : [[store(m - 1, o), 1]];
      const terms: Line['terms'] = [...left, [buy(m, o), 1], [use(m, o), -1], [store(m, o), -1]];
      lines.push({ terms, right: m === 0 ? -500 : 0, slack: [0, 0] });
    }
    const used = (factor: (o: number) => number) => oils.map((o): [number, number] => [use(m, o), factor(o)]);
    lines.push({ terms: used((o) => Number(o < 2)), right: VEGETABLE, slack: [0, VEGETABLE] });
    lines.push({ terms: used((o) => Number(o >= 2)), right: OTHER, slack: [0, OTHER] });
    lines.push({ terms: used((o) => (HARDNESS[o] ?? 0) - 6), right: 0, slack: [0, 3000] });
    lines.push({ terms: used((o) => 3 - (HARDNESS[o] ?? 0)), right: 0, slack: [0, 3000] });
  }
  const columns = 3 * MONTHS * OILS;
  const matrix = new Float64Array(lines.length * columns);
  lines.forEach(({ terms }, r) => terms.forEach(([column, factor]) => (matrix[r * columns + column] = factor)));
  const gains = new Float64Array(columns);
  const lower = new Float64Array(columns + lines.length);
  const upper = new Float64Array(columns + lines.length).fill(2000);
  for (let m = 0; m < MONTHS; m++) {
    for (const o of oils) {
      gains[buy(m, o)] = -(PRICES[m]?.[o] ?? 0);
      gains[use(m, o)] = 150;
      gains[store(m, o)] = -5;
      upper[store(m, o)] = m === MONTHS - 1 ? 500 : TANK;
      lower[store(m, o)] = m === MONTHS - 1 ? 500 : 0;
    }
  }
  lines.forEach(({ slack }, r) => ([lower[columns + r], upper[columns + r]] = slack));
  return { matrix, right: Float64Array.from(lines, (line) => line.right), gains, lower, upper };
}

test('the dual simplex finds the published optimum of a blending problem', () => {
  const simplex = new DualSimplex(foodManufacture());
  expect(simplex.solve()).toBe('optimal');
  expect(simplex.objective).toBeCloseTo(OPTIMUM, 2);
});
