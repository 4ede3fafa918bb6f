import { describe, expect, it } from 'vitest';
import type { Row } from '#contract/rows.ts';
import { readGross, scaleLimits, typedGrams } from './read-gross.ts';

const limits = scaleLimits([
  { readabilityMg: 100, maximumMg: 6_000_000 },
  { readabilityMg: 1000, maximumMg: 30_000_000 },
] as Row<'scales'>[]);
const read = (gross: string, tare = '68.0') => readGross({ gross, tare }, 850_000, limits);

describe('gross and tare as typed', () => {
  it('gives the net with comma and with point', () => {
    for (const gross of ['480.5', '480,5']) {
      expect(read(gross)).toMatchObject({ state: 'ok', grossMg: 480_500, tareMg: 68_000, weighed: { netMg: 412_500 } });
    }
  });
  it.each(['0', '-5', '1e9', 'abc', '1.234', '480.55', '99999999'])('never lets "%s" through', (gross) => {
    expect(read(gross)).toMatchObject({ state: 'problem', field: 'gross' });
  });
  it('says it in words when gross is below the tare', () => {
    expect(read('60')).toEqual({ state: 'below-tare', tareMg: 68_000 });
  });
  it('waits while nothing is typed', () => {
    expect(read('')).toEqual({ state: 'empty' });
  });
  it('blames the tare when the tare is wrong', () => {
    expect(read('480', 'x')).toMatchObject({ state: 'problem', field: 'tare' });
  });
  it('carries what the largest scale carries', () => {
    expect(read('29000')).toMatchObject({ state: 'ok' });
    expect(read('30001')).toMatchObject({ state: 'problem' });
  });
  it('offers a known tare in a form that it reads back', () => {
    for (const mg of [68_000, 68_100, 68_050, 68_055]) {
      expect(read('480', typedGrams(mg))).toMatchObject({ state: 'ok', tareMg: mg });
    }
  });
});
