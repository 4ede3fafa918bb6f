import { describe, expect, test } from 'vitest';
import type { Milligrams } from '#domain/mass.ts';
import {
  type ScaleClass,
  ScaleClassError,
  inServiceError,
  leastLoad,
  maximumPermissibleError,
} from '#domain/scale-class.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;

describe('OIML R 76-1 (read in a stored copy)', () => {
  test.each<[ScaleClass, number, number]>([
    // Table 6: load in e, error in e.
    ['III', 500, 0.5],
    ['III', 501, 1],
    ['III', 2000, 1],
    ['III', 2001, 1.5],
    ['III', 10_000, 1.5],
    ['II', 5000, 0.5],
    ['II', 5001, 1],
    ['II', 20_000, 1],
    ['II', 20_001, 1.5],
    ['II', 100_000, 1.5],
  ])('class %s at %d e: %d e', (scaleClass, load, error) => {
    const e = 100 as Milligrams;
    expect(maximumPermissibleError(scaleClass, e, (load * e) as Milligrams)).toBe(error * e);
  });

  test.each<[ScaleClass, number, number]>([
    // Table 3: e in mg, Min in e.
    ['III', 1000, 20],
    ['II', 50, 20],
    ['II', 100, 50],
  ])('class %s of %d mg: Min is %d e', (scaleClass, e, least) => {
    expect(leastLoad(scaleClass, e as Milligrams)).toBe(least * e);
  });

  test.each([
    // Computed from the tables: a 3000 g scale of class III, e = 1 g.
    [400, 0.5],
    [1000, 1],
    [3000, 1.5],
  ])('a class III scale of 1 g is right within ±%d g at %d g', (load, error) => {
    expect(maximumPermissibleError('III', mg(1), mg(load)) / 1000).toBe(error);
    expect(leastLoad('III', mg(1)) / 1000).toBe(20);
  });

  test('a load beyond its class is refused', () => {
    expect(() => maximumPermissibleError('III', mg(1), mg(10_001))).toThrow(ScaleClassError);
  });
});

test('in service a scale may be off by twice the initial error', () => {
  // New Zealand guidance on weighing instruments in use (read).
  expect(inServiceError('III', mg(1), mg(400)) / 1000).toBe(1);
});
