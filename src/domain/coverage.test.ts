import { describe, expect, test } from 'vitest';
import { areaOf, coverageOf } from './coverage.ts';
import { InkNeedError } from './ink-need.ts';

describe('the coverage of a separation', () => {
  test('is all of it where it is black, none where it is white, half where half is', () => {
    expect(coverageOf(Uint8Array.of(0, 0, 0))).toBe(1);
    expect(coverageOf(Uint8Array.of(255, 255))).toBe(0);
    expect(coverageOf(Uint8Array.of(0, 255))).toBe(0.5);
  });

  test('of no pixels is refused, and so is an area without a resolution', () => {
    expect(() => coverageOf(new Uint8Array())).toThrow(InkNeedError);
    expect(() => areaOf(100, 0)).toThrow(InkNeedError);
    expect(() => areaOf(Number.NaN, 300)).toThrow(InkNeedError);
  });
});
