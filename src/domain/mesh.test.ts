import { describe, expect, test } from 'vitest';
import {
  MeshError,
  type MeshSheet,
  type ThreadsPerCm,
  type ThreadsPerInch,
  doubtsOf,
  perCm,
  perInch,
  weaveOf,
} from './mesh.ts';

const sheet: MeshSheet = {
  count: 90 as ThreadsPerCm,
  threadUm: 40,
  openShare: 0.42,
  thicknessUm: 59,
  inkVolumeCm3PerM2: 25,
};

describe('a mesh', () => {
  test('per inch is converted, never passed through', () => {
    expect(perCm(110 as ThreadsPerInch)).toBeCloseTo(43.3, 1);
    expect(perInch(perCm(156 as ThreadsPerInch))).toBeCloseTo(156, 9);
  });

  test('as its maker gives it raises no doubt; with the count of an inch it does', () => {
    expect(doubtsOf(sheet)).toEqual([]);
    const wrong = doubtsOf({ ...sheet, count: 156 as ThreadsPerCm });
    expect(wrong).toHaveLength(1);
    expect(wrong[0]).toMatch(/per cm/);
  });

  test('with a volume that its open area and thickness do not give is asked about', () => {
    expect(doubtsOf({ ...sheet, inkVolumeCm3PerM2: 55 })[0]).toMatch(/cm³/);
  });

  test('without an opening is refused', () => {
    expect(() => weaveOf(305 as ThreadsPerCm, 34)).toThrow(MeshError);
    expect(() => weaveOf(Number.NaN as ThreadsPerCm, 34)).toThrow(MeshError);
  });
});
