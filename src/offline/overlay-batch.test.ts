import { v7 as uuidv7 } from 'uuid';
import { describe, expect, test } from 'vitest';
import type { Addition, OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import { batchMixed, fresh, fromTub, returned } from '#tests/support/operations.ts';
import { facts, operationOf, shownOf } from '#tests/support/overlay.ts';
import { componentRow, formulaRow, tubRow } from '#tests/support/rows.ts';
import { START } from '#tests/support/station.ts';
import { foldPending } from './overlay.ts';

describe('a mixed batch', () => {
  const base = componentRow({ cureC: 160, hazards: ['H317'] });
  const blue = componentRow({ cureC: 150 });
  const pure = (component: Row<'components'>) => [{ componentId: component.id, ppb: 1_000_000_000 }];
  const formula = formulaRow({ name: 'Harbour blue' });
  const known = facts({ formulas: [formula], components: [base, blue] });

  test('is a tub with the blend of what went in, and a batch with what was re-used', () => {
    const leftover = tubRow({
      composition: pure(blue),
      balanceMg: 500_000,
      restrictions: ['contains metal flake'],
    });
    const mixed = batchMixed([fromTub(leftover.id, 250_000), fresh(base.id, 750_000)], { formulaId: formula.id });
    const operation = operationOf(mixed);
    const shown = foldPending(shownOf(leftover), [operation], known);
    expect(shown.buckets.get(leftover.id)).toMatchObject({ balanceMg: 250_000, state: 'shelf' });
    expect(shown.buckets.get(mixed.body.filled[0]?.bucketId as string)).toMatchObject({
      name: 'Harbour blue',
      balanceMg: 1_000_000,
      composition: [
        { componentId: base.id, ppb: 750_000_000 },
        { componentId: blue.id, ppb: 250_000_000 },
      ],
      cureC: 160,
      hazards: ['H317'],
      restrictions: ['contains metal flake'],
      parents: [{ bucketId: leftover.id, massMg: 250_000 }],
      released: false,
      state: 'shelf',
    });
    expect(shown.batches.get(mixed.body.batchId)).toMatchObject({
      actualMg: 1_000_000,
      reusedMg: 250_000,
      state: 'mixed',
      mixedBy: operation.actorId,
      mixedAt: '2026-11-30T08:01:00.000Z',
    });
  });

  test('that scraped a tub empty leaves nothing in it, whatever the books held', () => {
    const leftover = tubRow({ composition: pure(blue), balanceMg: 260_000 });
    const mixed = batchMixed([fromTub(leftover.id, 250_000, true)]);
    const shown = foldPending(shownOf(leftover), [operationOf(mixed)], known);
    expect(shown.buckets.get(leftover.id)).toMatchObject({ balanceMg: 0, state: 'empty', locationId: null });
  });

  test('that scraped a tub empty takes what was shown of it: what others used meanwhile is flagged, not hidden', () => {
    const leftover = tubRow({ composition: pure(blue), balanceMg: 200_000, seen: { other: 3 } });
    const displayed = { balanceMg: 260_000, grade: 'untouched' as const, generation: 0 };
    const mixed = batchMixed([{ ...fromTub(leftover.id, 250_000, true), displayed } as Addition]);
    const shown = foldPending(shownOf(leftover), [operationOf(mixed, { [leftover.id]: {} })], known);
    expect(shown.buckets.get(leftover.id)).toMatchObject({ balanceMg: -60_000, state: 'empty', needsRecount: true });
  });

  test('is of the grade that was shown when it took from a tub', () => {
    const leftover = tubRow({ composition: pure(blue), grade: 'returned', generation: 2 });
    const displayed = { balanceMg: 500_000, grade: 'untouched' as const, generation: 0 };
    const mixed = batchMixed([{ ...fromTub(leftover.id, 100_000), displayed } as Addition]);
    const shown = foldPending(shownOf(leftover), [operationOf(mixed)], known);
    const tub = shown.buckets.get(mixed.body.filled[0]?.bucketId as string);
    expect(tub).toMatchObject({ grade: 'untouched', generation: 0 });
  });

  test('takes the worst grade and the earliest use-by of what went in', () => {
    const old = tubRow({ composition: pure(blue), grade: 'returned', useBy: '2027-01-31', generation: 1 });
    const lot = { id: uuidv7(), componentId: base.id, code: 'L1', strengthPpm: 0, useBy: '2027-06-30', balanceMg: 1 };
    const addition = { ...fresh(base.id, 100), lotId: lot.id };
    const mixed = batchMixed([fromTub(old.id, 100), addition]);
    const given = facts({ components: [base, blue], lots: [lot] });
    const shown = foldPending(shownOf(old), [operationOf(mixed)], given);
    expect(shown.buckets.get(mixed.body.filled[0]?.bucketId as string)).toMatchObject({
      grade: 'returned',
      useBy: '2027-01-31',
      generation: 1,
    });
  });

  test('of a tub whose content is unknown has an unknown composition', () => {
    const mystery = tubRow({ composition: [], grade: 'unknown' });
    const mixed = batchMixed([fromTub(mystery.id, 100), fresh(base.id, 100)]);
    const shown = foldPending(shownOf(mystery), [operationOf(mixed)], known);
    expect(shown.buckets.get(mixed.body.filled[0]?.bucketId as string)).toMatchObject({
      composition: [],
      grade: 'unknown',
    });
  });

  test('is the same blend in whatever order it was weighed, to the last part per billion', () => {
    const thirds = ['a', 'b', 'c'].map(() => fresh(uuidv7(), 100));
    const compositionOf = (additions: typeof thirds) => {
      const mixed = batchMixed(additions);
      const shown = foldPending(shownOf(), [operationOf(mixed)], known);
      return shown.buckets.get(mixed.body.filled[0]?.bucketId as string)?.composition;
    };
    expect(compositionOf(thirds)).toEqual(compositionOf([...thirds].reverse()));
  });

  test('weighed twice from one tub lowers it twice and names it once', () => {
    const leftover = tubRow({ composition: pure(blue), balanceMg: 500_000 });
    const mixed = batchMixed([fromTub(leftover.id, 100_000), fromTub(leftover.id, 50_000)]);
    const shown = foldPending(shownOf(leftover), [operationOf(mixed)], known);
    expect(shown.buckets.get(leftover.id)?.balanceMg).toBe(350_000);
    expect(shown.buckets.get(mixed.body.filled[0]?.bucketId as string)?.parents).toEqual([
      { bucketId: leftover.id, massMg: 150_000 },
    ]);
  });

  test('goes on in the order of recording: its tub can be issued and come back at once', () => {
    const mixed = batchMixed([fresh(base.id, 500_000)]);
    const tubId = mixed.body.filled[0]?.bucketId as string;
    const issue: OperationBody = {
      type: 'bucket-issued',
      body: { bucketId: tubId, jobId: null, overrideReason: 'Rush' },
    };
    const operations = [mixed, issue, returned(tubId)].map((body) => operationOf(body));
    expect(foldPending(shownOf(), operations, known).buckets.get(tubId)).toMatchObject({
      balanceMg: 300_000,
      state: 'shelf',
      grade: 'returned',
    });
  });

  test('released later is released, and so are its tubs and no others', () => {
    const mixed = batchMixed([fresh(base.id, 500_000)]);
    const bystander = tubRow({ released: false, batchId: uuidv7() });
    const release = { light: 'D50 booth', byEye: true, at: START.toISOString() };
    const released: OperationBody = { type: 'batch-released', body: { batchId: mixed.body.batchId, release } };
    const operations = [operationOf(mixed), operationOf(released)];
    const shown = foldPending(shownOf(bystander), operations, known);
    expect(shown.batches.get(mixed.body.batchId)).toMatchObject({
      state: 'released',
      light: 'D50 booth',
      releasedBy: operations[1]?.actorId,
    });
    expect(shown.buckets.get(mixed.body.filled[0]?.bucketId as string)?.released).toBe(true);
    expect(shown.buckets.get(bystander.id)?.released).toBe(false);
  });
});
