import { describe, expect, test } from 'vitest';
import { type ThreadsPerCm, type ThreadsPerInch, doubtsOf, perCm, theoreticalVolume, weaveOf } from '#domain/mesh.ts';

describe('plain weave', () => {
  test.each([
    // w = 10⁴/n − d (µm), open area (w/(w+d))²: computed from the definition.
    [43, 80, 152.6, 43.0],
    [61, 64, 99.9, 37.2],
    [77, 55, 74.9, 33.2],
    [120, 34, 49.3, 35.0],
  ])('%d/cm of %d µm opens %d µm and %d %%', (count, thread, opening, percent) => {
    const { openingUm, openShare } = weaveOf(count as ThreadsPerCm, thread);
    expect(openingUm).toBeCloseTo(opening, 1);
    expect(openShare * 100).toBeCloseTo(percent, 1);
  });

  test('110 to the inch at 80 µm is published as 43 % open', () => {
    // A mesh maker's table (read): 110/in (43/cm), 80 µm, 43 % open.
    expect(weaveOf(perCm(110 as ThreadsPerInch), 80).openShare).toBeCloseTo(0.43, 2);
  });
});

describe("a mesh maker's table (read)", () => {
  test.each([
    // count/cm, thread µm, opening µm, open %, thickness µm, ink volume cm³/m²
    [90, 40, 73, 42, 59, 25],
    [90, 48, 65, 33, 72, 24],
    [90, 54, 59, 27, 84, 23],
  ])('%d/cm-%d: open area × thickness is its ink volume', (count, threadUm, opening, open, thicknessUm, volume) => {
    expect(Math.round(theoreticalVolume(open / 100, thicknessUm))).toBe(volume);
    // Makers measure the opening on the loom; 90-54's fabric is flatter than the weave says, by a few µm.
    expect(Math.abs(weaveOf(count as ThreadsPerCm, threadUm).openingUm - opening)).toBeLessThan(4);
    const sheet = {
      count: count as ThreadsPerCm,
      threadUm,
      openShare: open / 100,
      thicknessUm,
      inkVolumeCm3PerM2: volume,
    };
    expect(doubtsOf(sheet)).toEqual([]);
  });
});
