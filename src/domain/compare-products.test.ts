import fc from 'fast-check';
import { expect, test } from 'vitest';
import { compareProducts, floorQuotient } from './compare-products.ts';

const whole = fc.oneof(fc.integer({ min: 0, max: 20 }), fc.maxSafeNat());
const exact = (a: number, b: number, c: number, d: number) => {
  const off = BigInt(a) * BigInt(b) - BigInt(c) * BigInt(d);
  return off > 0n ? 1 : off < 0n ? -1 : 0;
};

test('products are told apart exactly, also where doubles cannot', () => {
  // (2⁵²+1)² and 2⁵²·(2⁵²+2) are one apart.
  const n = 2 ** 52;
  expect(compareProducts(n + 1, n + 1, n, n + 2)).toBe(1);
  expect(compareProducts(n, n + 2, n + 1, n + 1)).toBe(-1);
  fc.assert(
    fc.property(whole, whole, whole, whole, fc.integer({ min: -2, max: 2 }), (a, b, c, d, off) => {
      expect(compareProducts(a, b, c, d)).toBe(exact(a, b, c, d));
      const near = Math.max(0, Math.min(Number.MAX_SAFE_INTEGER, a + off));
      expect(compareProducts(near, b, b, a)).toBe(exact(near, b, b, a));
    }),
  );
});

test('a quotient is rounded down exactly', () => {
  fc.assert(
    fc.property(whole, whole, fc.integer({ min: 1, max: 2e9 }), (a, b, c) => {
      const quotient = (BigInt(a) * BigInt(b)) / BigInt(c);
      if (quotient < 2n ** 53n) expect(BigInt(floorQuotient(a, b, c))).toBe(quotient);
      const multiple = Math.floor(a / 3e9);
      expect(floorQuotient(multiple, c, c)).toBe(multiple);
    }),
  );
});
