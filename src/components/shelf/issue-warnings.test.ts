import { describe, expect, it } from 'vitest';
import type { Row } from '#contract/rows.ts';
import { whyNotForJob } from './issue-warnings.ts';

const colours = [{ formulaId: 'sky' }] as Row<'jobs'>['colours'];
const job = { number: 'J-118', maxCureC: 130, compliance: ['contains phthalates'], colours };
const tub = { cureC: 120, restrictions: [] as string[], formulaId: 'sky' };

describe('issuing a tub for a job', () => {
  it('warns of nothing when colour, cure and restrictions fit', () => {
    expect(whyNotForJob(tub, job)).toEqual([]);
    expect(whyNotForJob({ ...tub, cureC: 130 }, job)).toEqual([]);
  });
  it('warns when the ink cures hotter than the garment takes', () => {
    expect(whyNotForJob({ ...tub, cureC: 160 }, job)).toEqual(['Cures at 160 °C, the garment takes 130 °C.']);
  });
  it('warns of another colour and of what the job rules out', () => {
    expect(whyNotForJob({ ...tub, formulaId: 'red', restrictions: ['contains phthalates'] }, job)).toEqual([
      'J-118 does not ask for this colour.',
      'The job rules out: contains phthalates.',
    ]);
  });
});
