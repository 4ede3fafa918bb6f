import { v7 as uuidv7 } from 'uuid';
import { describe, expect, test } from 'vitest';
import type { Operation } from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { relocated, returned } from '#tests/support/operations.ts';
import { facts, installId, operationOf, shownOf } from '#tests/support/overlay.ts';
import { tubRow } from '#tests/support/rows.ts';
import { foldPending } from './overlay.ts';

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
    const scraped = { grossMg: 68_000 as Milligrams, displayedMg: 200_000 };
    expect(after(tub, returned(tub.id, scraped))).toMatchObject({ state: 'empty', balanceMg: 0 });
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
    const operations = [operationOf(relocated(tub.id)), operationOf(returned(tub.id))];
    const seen = foldPending(shownOf(tub), operations, facts()).buckets.get(tub.id)?.seen;
    expect(seen).toEqual({ [installId]: operations[1]?.deviceSeq });
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
