import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type BatchFacts, type BucketFacts, type Grade, type Parent, inherit, mayGoInto } from './compatibility.ts';

const bucket: BucketFacts = {
  familyId: 'standard',
  grade: 'untouched',
  state: 'shelf',
  reservedFor: null,
  jobId: null,
  useBy: null,
  cureC: 160,
  restrictions: [],
  generation: 0,
  needsRecount: false,
  released: true,
};
const batch: BatchFacts = { familyId: 'standard', date: '2026-05-04', maximumCureC: null, jobId: null, compliance: [] };
const rules = [
  { intoId: 'standard', fromId: 'standard', verdict: 'yes' as const, reason: '' },
  { intoId: 'low-bleed', fromId: 'standard', verdict: 'no' as const, reason: 'Dilutes it.' },
  { intoId: 'standard', fromId: 'silicone', verdict: 'never' as const, reason: 'Silicone spoils the print.' },
];
const judge = (of: Partial<BucketFacts>, into: Partial<BatchFacts> = {}) =>
  mayGoInto({ ...bucket, ...of }, { ...batch, ...into }, rules);

describe('what may go into a batch', () => {
  test('a released leftover of the same family may', () => {
    expect(judge({})).toEqual({ ok: true });
  });

  test('families without a rule are kept apart', () => {
    expect(judge({ familyId: 'water-based' })).toEqual({ ok: false, reason: 'No rule allows this family.' });
  });

  test.each<[string, Partial<BucketFacts>, Partial<BatchFacts>, string]>([
    ['a verdict of no', {}, { familyId: 'low-bleed' }, 'Dilutes it.'],
    ['a verdict of never', { familyId: 'silicone' }, {}, 'Silicone spoils the print.'],
    ['quarantine', { state: 'quarantine' }, {}, 'In quarantine.'],
    ['a tub at a press', { state: 'at-press' }, {}, 'At a press.'],
    ['an unknown composition', { grade: 'unknown' }, {}, 'What is in it is unknown.'],
    ['two records that disagree', { needsRecount: true }, {}, 'Two records disagree. Weigh it again first.'],
    ['ink that is not released', { released: false }, {}, 'Not released.'],
    ['a reservation for another', { reservedFor: 'job 7', jobId: 'j7' }, { jobId: 'j8' }, 'Kept for job 7.'],
    ['a use-by of yesterday', { useBy: '2026-05-03' }, {}, 'Past its use-by, 2026-05-03.'],
    ['a third return', { generation: 2 }, {}, 'Came back from the press twice already.'],
    ['a compliance class', { restrictions: ['latex'] }, { compliance: ['latex'] }, 'The job rules out: latex.'],
    ['too hot a cure', { cureC: 160 }, { maximumCureC: 130 }, 'Cures at 160 °C, the garment takes 130 °C.'],
  ])('%s keeps it out, and says so', (_, of, into, reason) => {
    expect(judge(of, into)).toEqual({ ok: false, reason });
  });

  test('its own job may have what is reserved for it, and today is not past the use-by', () => {
    expect(judge({ reservedFor: 'job 7', jobId: 'j7' }, { jobId: 'j7' })).toEqual({ ok: true });
    expect(judge({ useBy: '2026-05-04' })).toEqual({ ok: true });
  });
});

const anyGrade = fc.constantFrom<Grade>('untouched', 'returned', 'assumed', 'unknown');
const anyParent = fc.record<Parent>({
  grade: anyGrade,
  useBy: fc.constantFrom(null, '2026-01-01', '2026-06-30', '2027-02-01'),
  cureC: fc.constantFrom(null, 130, 160),
  restrictions: fc.subarray(['latex', 'phthalates']),
  hazards: fc.subarray(['Irritant']),
  generation: fc.nat(3),
  lots: fc.subarray(['lot 1', 'lot 2', 'lot 3']),
});

describe('what a mix inherits', () => {
  test('is the worst of its parents in everything', () => {
    const mixed = inherit([
      {
        grade: 'untouched',
        useBy: '2026-06-30',
        cureC: 130,
        restrictions: ['latex'],
        hazards: [],
        generation: 0,
        lots: ['b', 'a'],
      },
      {
        grade: 'returned',
        useBy: '2026-01-01',
        cureC: 160,
        restrictions: [],
        hazards: ['Irritant'],
        generation: 2,
        lots: ['b'],
      },
    ]);
    expect(mixed).toEqual({
      grade: 'returned',
      useBy: '2026-01-01',
      cureC: 160,
      restrictions: ['latex'],
      hazards: ['Irritant'],
      generation: 2,
      lots: ['a', 'b'],
    });
  });

  test('does not depend on how the parents were mixed together first', () => {
    fc.assert(
      fc.property(anyParent, anyParent, anyParent, (a, b, c) => {
        expect(inherit([inherit([a, b]), c])).toEqual(inherit([a, inherit([c, b])]));
      }),
    );
  });
});
