/** Doubles are off by at most half of this, relative to what they stand for. */
const DOUBLE = 2 ** -52;

/** The sign of a·b − c·d for whole numbers from 0 to 2⁵³: by doubles where they are far apart, exactly where near. */
export function compareProducts(a: number, b: number, c: number, d: number): number {
  const left = a * b;
  const right = c * d;
  const off = left - right;
  if (Math.abs(off) > (left + right) * 2 * DOUBLE) return Math.sign(off);
  const exact = BigInt(a) * BigInt(b) - BigInt(c) * BigInt(d);
  return exact > 0n ? 1 : exact < 0n ? -1 : 0;
}

/** Below this a quotient of doubles is off by less than one. */
const NEAR = 2 ** 50;

/** ⌊a·b / c⌋ for whole numbers from 0 to 2⁵³, c above 0; exact where the result is below 2⁵³. */
export function floorQuotient(a: number, b: number, c: number): number {
  const near = Math.floor((a * b) / c);
  if (near > NEAR) return Number((BigInt(a) * BigInt(b)) / BigInt(c));
  if (compareProducts(near, c, a, b) > 0) return near - 1;
  return compareProducts(near + 1, c, a, b) <= 0 ? near + 1 : near;
}
