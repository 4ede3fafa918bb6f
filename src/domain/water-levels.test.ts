import fc from 'fast-check';
import { expect, test } from 'vitest';
import { waterLevels } from './water-levels.ts';

const anyBasins = fc.array(
  fc
    .tuple(fc.bigInt(1n, 1000n), fc.bigInt(0n, 1000n), fc.bigInt(0n, 1000n))
    .map(([goal, a, b]) => ({ goal, floor: a < b ? a : b, ceiling: a < b ? b : a })),
  { minLength: 1, maxLength: 8 },
);
const total = (list: readonly bigint[]) => list.reduce((a, b) => a + b, 0n);

test('levels add up to the room between their floors and ceilings, whenever these let them', () => {
  fc.assert(
    fc.property(anyBasins, fc.bigInt(0n, 8000n), (basins, room) => {
      const levels = waterLevels(basins, room);
      const possible =
        total(basins.map(({ floor }) => floor)) <= room && room <= total(basins.map(({ ceiling }) => ceiling));
      expect(levels !== undefined).toBe(possible);
      if (levels === undefined) return;
      expect(total(levels)).toBe(room);
      levels.forEach((level, n) => {
        const { floor, ceiling } = basins[n] ?? { floor: 0n, ceiling: 0n };
        expect(level >= floor && level <= ceiling).toBe(true);
      });
    }),
  );
});

test('where no floor or ceiling is in the way each comes to its share', () => {
  const free = [60n, 30n, 10n].map((goal) => ({ goal, floor: 0n, ceiling: 1_000_000n }));
  expect(waterLevels(free, 5000n)).toEqual([3000n, 1500n, 500n]);
});

test('one that is over its share leaves the others theirs in proportion', () => {
  const basins = [
    { goal: 60n, floor: 0n, ceiling: 100n },
    { goal: 30n, floor: 0n, ceiling: 100n },
    { goal: 10n, floor: 19n, ceiling: 100n },
  ];
  expect(waterLevels(basins, 100n)).toEqual([54n, 27n, 19n]);
});
