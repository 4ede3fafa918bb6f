import { expect, test } from 'vitest';
import { contentsOf } from './fill-pot.ts';
import { compositionFromParts } from './composition.ts';
import { leastBatch } from './least-batch.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';

const target = compositionFromParts([
  { componentId: 'base', parts: '24' },
  { componentId: 'blue', parts: '1' },
  { componentId: 'white', parts: '1' },
]);
const pure = (componentId: string, mass: number) => ({
  composition: new Map([[componentId, WHOLE]]),
  mass: mass as Milligrams,
});

test('is exact to the milligram: one less has no room for the lower edges of the others', () => {
  // Base may be 1 ppb more, yet blue and white no less: 952488/0.923076923 = 1031862.0001 mg.
  const tolerance = new Map([['base', 1 as PartsPerBillion]]);
  expect(leastBatch(target, tolerance, contentsOf([pure('base', 952_488)]), 0 as Milligrams)).toBe(1_031_863);
});

test('a step of rounding is excused of what the formula has, never of a foreign component', () => {
  expect(leastBatch(target, new Map(), contentsOf([pure('blue', 1000)]), 100 as Milligrams)).toBeLessThan(23_401);
  expect(leastBatch(target, new Map(), contentsOf([pure('red', 50)]), 100 as Milligrams)).toBeUndefined();
});
