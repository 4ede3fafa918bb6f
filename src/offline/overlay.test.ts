import { v7 as uuidv7 } from 'uuid';
import { describe, expect, test } from 'vitest';
import type { Operation } from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { componentRow, formulaRow, tubRow } from '#tests/support/rows.ts';
import { START } from '#tests/support/station.ts';
import { type OverlayFacts, type Shown, foldPending } from './overlay.ts';

const installId = uuidv7();
let lastSeq = 0;

function operationOf(body: OperationBody, seen: Operation['seen'] = {}): Operation {
  return {
    opId: uuidv7(),
    installId,
    deviceSeq: ++lastSeq,
    opVersion: 1,
    actorId: uuidv7(),
    grantId: uuidv7(),
    grantLapsed: false,
    deviceTime: START.toISOString(),
    clock: { offsetMs: 60_000, uncertaintyMs: 10, lastContact: null },
    seen,
    ...body,
  };
}

const byId = <T extends { id: string }>(rows: readonly T[]) => new Map(rows.map((row) => [row.id, row]));
const shownOf = (...tubs: Row<'buckets'>[]): Shown => ({ buckets: byId(tubs), batches: new Map() });

function facts(given: { formulas?: Row<'formulas'>[]; components?: Row<'components'>[]; lots?: Row<'lots'>[] } = {}) {
  return {
    formulas: byId(given.formulas ?? []),
    components: byId(given.components ?? []),
    lots: byId(given.lots ?? []),
  } satisfies OverlayFacts;
}

/** What becomes of one tub by these entries. */
function after(tub: Row<'buckets'>, ...bodies: OperationBody[]): Row<'buckets'> {
  const operations = bodies.map((body) => operationOf(body));
  return foldPending(shownOf(tub), operations, facts()).buckets.get(tub.id) as Row<'buckets'>;
}

describe('a tub', () => {
  test('issued is at the press, with its job and no place', () => {
    const jobId = uuidv7();
    const tub = tubRow();
    const body: OperationBody = { type: 'bucket-issued', body: { bucketId: tub.id, jobId, overrideReason: null } };
    expect(after(tub, body)).toMatchObject({ state: 'at-press', jobId, locationId: null, balanceMg: 500_000 });
  });

  test('returned holds the change by weight, one generation more', () => {
    const tub = tubRow({ state: 'at-press', balanceMg: 500_000, generation: 1 });
    expect(after(tub, returned(tub.id))).toMatchObject({
      state: 'shelf',
      balanceMg: 300_000,
      grade: 'returned',
      generation: 2,
    });
  });

  test.each(['assumed', 'unknown'] as const)('of the grade %s keeps it when it comes back', (grade) => {
    const tub = tubRow({ grade });
    expect(after(tub, returned(tub.id)).grade).toBe(grade);
  });

  test('returned dirty goes into quarantine', () => {
    const tub = tubRow();
    expect(after(tub, returned(tub.id, { condition: 'dirty' })).state).toBe('quarantine');
  });

  test('returned with nothing in it is empty', () => {
    const tub = tubRow({ balanceMg: 200_000 });
    expect(after(tub, returned(tub.id))).toMatchObject({ state: 'empty', balanceMg: 0 });
  });

  test('spent below nothing is flagged and not clipped', () => {
    const tub = tubRow({ balanceMg: 150_000 });
    expect(after(tub, returned(tub.id))).toMatchObject({ balanceMg: -50_000, needsRecount: true });
  });

  test('weighed again holds the change, and its flag is gone', () => {
    const tub = tubRow({ balanceMg: -50_000, needsRecount: true });
    const body = { bucketId: tub.id, grossMg: 88_000, tareMg: 68_000, displayedMg: -50_000, deltaMg: 70_000 };
    const recount = { type: 'bucket-recounted', body } as OperationBody;
    expect(after(tub, recount)).toMatchObject({ balanceMg: 20_000, needsRecount: false, tareMg: 68_000 });
  });

  test('moved is at its new place', () => {
    const tub = tubRow();
    const move = relocated(tub.id);
    expect(after(tub, move).locationId).toBe(move.body.locationId);
  });

  test('discarded holds nothing', () => {
    const tub = tubRow({ needsRecount: true });
    const body = { bucketId: tub.id, displayedMg: 500_000, reason: 'Skinned over', note: null };
    expect(after(tub, { type: 'bucket-discarded', body })).toMatchObject({
      state: 'discarded',
      balanceMg: 0,
      needsRecount: false,
    });
  });

  test('that another install changed unseen is flagged when it is spent', () => {
    const other = uuidv7();
    const tub = tubRow({ seen: { [other]: 7 } });
    const spend = (seen: number) => operationOf(returned(tub.id), { [tub.id]: { [other]: seen } });
    const flag = (operation: Operation) =>
      foldPending(shownOf(tub), [operation], facts()).buckets.get(tub.id)?.needsRecount;
    expect(flag(spend(6))).toBe(true);
    expect(flag(spend(7))).toBe(false);
  });

  test('knows of the last own entry', () => {
    const tub = tubRow();
    expect(after(tub, relocated(tub.id), returned(tub.id)).seen).toEqual({ [installId]: lastSeq });
  });

  test('that is not on this device stays unknown', () => {
    const tub = tubRow();
    const shown = shownOf(tub);
    expect(foldPending(shown, [operationOf(returned(uuidv7()))], facts())).toEqual(shown);
  });

  test('folded changes nothing in the cache’s rows', () => {
    const tub = tubRow();
    const before = structuredClone(tub);
    after(tub, returned(tub.id), relocated(tub.id));
    expect(tub).toEqual(before);
  });

  test('from before the books stands on the shelf with what was weighed', () => {
    const body = {
      bucketId: uuidv7(),
      code: 'AC23467A',
      name: 'Old blue',
      familyId: uuidv7(),
      containerId: uuidv7(),
      grossMg: 500_000 as Milligrams,
      tareMg: 68_000 as Milligrams,
      locationId: null,
      composition: [],
      lab: null,
    };
    const shown = foldPending(shownOf(), [operationOf({ type: 'bucket-adopted', body })], facts());
    expect(shown.buckets.get(body.bucketId)).toMatchObject({
      balanceMg: 432_000,
      grade: 'unknown',
      state: 'shelf',
      released: true,
      filledAt: '2026-11-30T08:01:00.000Z',
    });
  });
});

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
