import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  BucketCodeError,
  CODES_PER_PREFIX,
  CODE_ALPHABET,
  codePrefix,
  formatBucketCode,
  makeBucketCode,
  nearestBucketCodes,
  parseBucketCode,
} from './bucket-code.ts';

const anyPrefix = fc.integer({ min: 0, max: CODE_ALPHABET.length ** 2 - 1 }).map((n) => codePrefix(n) as string);
const anyCounter = fc.integer({ min: 0, max: CODES_PER_PREFIX - 1 });

describe('tub codes', () => {
  // Computed for our own mock-ups, with the library.
  test.each(['MN7WYDF4', 'W9M9HM77'])('%s of the mock-ups carries its check character', (code) => {
    expect(parseBucketCode(code)).toEqual({ code });
  });

  test('a code is read from small letters, groups, spaces and a scanned address', () => {
    for (const text of ['mn7w-ydf4', ' MN7W YDF4 ', 'HTTPS://HOST/B/MN7WYDF4', 'https://host.example/b/mn7wydf4?x=1']) {
      expect(parseBucketCode(text)).toEqual({ code: 'MN7WYDF4' });
    }
    expect(formatBucketCode('MN7WYDF4')).toBe('MN7W-YDF4');
  });

  test.each([
    ['MN7WYDF', 'A tub code has 8 characters, this has 7.'],
    ['MN7W-YDO4', 'Tub codes never use “O”. Look again.'],
    ['MN7W-YDF7', 'One character is wrong: the check character does not fit.'],
  ])('%s is refused by the rule that it breaks', (text, problem) => {
    expect(parseBucketCode(text)).toEqual({ problem });
  });

  test('every code that is made can be read, and has no character that is mistaken for another', () => {
    fc.assert(
      fc.property(anyPrefix, anyCounter, (prefix, counter) => {
        const code = makeBucketCode(prefix, counter);
        expect(code).toMatch(/^[234679ACDEFGHJKMNPQRTVWXY]{8}$/);
        expect(code.startsWith(prefix)).toBe(true);
        expect(parseBucketCode(code)).toEqual({ code });
      }),
    );
  });

  test('ten thousand counters in a row give ten thousand codes', () => {
    const codes = Array.from({ length: 10_000 }, (_, counter) => makeBucketCode('A2', counter));
    expect(new Set(codes).size).toBe(10_000);
  });

  test('any single wrong character is found out', () => {
    fc.assert(
      fc.property(anyPrefix, anyCounter, fc.nat(7), fc.nat(24), (prefix, counter, at, letter) => {
        const code = makeBucketCode(prefix, counter);
        const other = CODE_ALPHABET[letter] as string;
        fc.pre(code[at] !== other);
        expect(parseBucketCode(code.slice(0, at) + other + code.slice(at + 1))).toHaveProperty('problem');
      }),
    );
  });

  test('a mistyped code finds the known one that is one letter away', () => {
    expect(nearestBucketCodes('mn7w-ydf7', ['MN7WYDF4', 'W9M9HM77'])).toEqual(['MN7WYDF4']);
  });

  test.each([
    ['O1', 0],
    ['A', 0],
    ['A2', -1],
    ['A2', CODES_PER_PREFIX],
    ['A2', 0.5],
  ])('prefix %s with counter %d is refused by name', (prefix, counter) => {
    expect(() => makeBucketCode(prefix, counter)).toThrow(BucketCodeError);
  });
});
