import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Milligrams } from '#domain/mass.ts';
import { weighBack } from './weigh-back.ts';

const weigh = (grossMg: number, tareMg: number, displayedMg: number) =>
  weighBack({ grossMg: grossMg as Milligrams, tareMg: tareMg as Milligrams, displayedMg });

describe('weighing a tub with what is left in it', () => {
  it('takes the tare off and tells what the books change by', () => {
    expect(weigh(480_000, 68_000, 850_000)).toEqual({ netMg: 412_000, deltaMg: -438_000, heavierMg: 0 });
  });
  it('tells how much heavier it is than the books say', () => {
    expect(weigh(930_000, 68_000, 850_000)).toMatchObject({ netMg: 862_000, deltaMg: 12_000, heavierMg: 12_000 });
  });
  it('is empty when gross is the tare', () => {
    expect(weigh(68_000, 68_000, 850_000)).toMatchObject({ netMg: 0, deltaMg: -850_000 });
  });
  it('is refused below the tare', () => {
    expect(weigh(67_900, 68_000, 850_000)).toBeUndefined();
  });
  it('brings a balance below zero back to what is there', () => {
    expect(weigh(80_000, 68_000, -5_000)).toEqual({ netMg: 12_000, deltaMg: 17_000, heavierMg: 17_000 });
  });
  it('always leaves the net in the books', () => {
    fc.assert(
      fc.property(fc.nat(1e8), fc.nat(1e8), fc.integer({ min: -1e8, max: 1e8 }), (gross, tare, displayed) => {
        const weighed = weigh(gross, tare, displayed);
        return weighed === undefined ? gross < tare : displayed + weighed.deltaMg === gross - tare;
      }),
    );
  });
});
