import { describe, expect, test } from 'vitest';
import { type Composition, blend, compositionFromParts } from '#domain/composition.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { repairOvershoot } from '#domain/repair-overshoot.ts';

const strength = (percent: number): Composition =>
  compositionFromParts([
    { componentId: 'active', parts: String(percent) },
    { componentId: 'base', parts: String(100 - percent) },
  ]);
const grams = (mass: number) => (mass * 1000) as Milligrams;

describe('alligation, as pharmacists are taught it', () => {
  test('zinc oxide 50 %, 20 % and 5 % in 1 : 1 : 10 is 10 %', () => {
    // PHAR 4330 course module, alligation with three strengths (read): the parts follow from the two pairings
    // 50 with 5 and 20 with 5: 5, 5 and 40 + 10.
    const mixed = blend([
      { composition: strength(50), mass: grams(1) },
      { composition: strength(20), mass: grams(1) },
      { composition: strength(5), mass: grams(10) },
    ]);
    expect(mixed.get('active')).toBe(100_000_000);
  });

  test('95 % and 50 % in 20 : 25 is 70 %', () => {
    // Handbook of pharmaceutical calculations, from memory.
    const mixed = blend([
      { composition: strength(95), mass: grams(20) },
      { composition: strength(50), mass: grams(25) },
    ]);
    expect(mixed.get('active')).toBe(700_000_000);
  });

  test('3200 g of 5 % becomes 20 % with 600 g of the pure substance', () => {
    // Worked answer of a pharmaceutical calculations text (read).
    const { choices } = repairOvershoot({
      target: strength(20),
      planned: grams(3200),
      contents: [{ composition: strength(5), mass: grams(3200) }],
      tolerance: new Map<string, PartsPerBillion>(),
      capacity: grams(10_000),
      readability: 1 as Milligrams,
    });
    expect(choices[0]?.kind).toBe('grow');
    // A scale step of rounding is let pass: 1 mg of base is 1.25 mg of batch.
    expect(Math.abs((choices[0]?.batch ?? 0) - grams(3800))).toBeLessThanOrEqual(2);
    expect(Math.abs((choices[0]?.additions.get('active') ?? 0) - grams(600))).toBeLessThanOrEqual(2);
  });
});
