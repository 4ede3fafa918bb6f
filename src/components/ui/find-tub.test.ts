import { describe, expect, it } from 'vitest';
import { makeBucketCode } from '#domain/bucket-code.ts';
import type { Row } from '#contract/rows.ts';
import { findTub } from './find-tub.ts';

const code = makeBucketCode('MN', 7);
const tub = { code, name: 'Winter sky' } as Row<'buckets'>;
const shelf = [tub, { code: makeBucketCode('MN', 8) } as Row<'buckets'>];
const swapLast = (text: string) => text.slice(0, -1) + (text.endsWith('4') ? '6' : '4');

describe('finding a tub by its code', () => {
  it('takes the bare code, small letters and the dash', () => {
    expect(findTub(`${code.slice(0, 4)}-${code.slice(4)}`.toLowerCase(), shelf)).toEqual({ tub });
  });
  it('takes the address that the label carries', () => {
    expect(findTub(`HTTPS://SHOP.EXAMPLE/B/${code}`, shelf)).toEqual({ tub });
  });
  it('names the broken rule and offers the tub that is one letter away', () => {
    expect(findTub(swapLast(code), shelf)).toEqual({
      problem: 'One character is wrong: the check character does not fit.',
      near: tub,
    });
  });
  it('offers it also when the letter is one that codes never use, and when it came as an address', () => {
    expect(findTub(`https://shop.example/b/O${code.slice(1)}`, shelf)).toMatchObject({ near: tub });
  });
  it('says that a right code is not on this device', () => {
    expect(findTub(makeBucketCode('QR', 1), shelf)).toEqual({
      problem: 'No such tub on this device. Send, then look again.',
      near: undefined,
    });
  });
  it('says how long a code is when the length is wrong', () => {
    expect(findTub('MN7', shelf)).toEqual({ problem: 'A tub code has 8 characters, this has 3.', near: undefined });
  });
});
