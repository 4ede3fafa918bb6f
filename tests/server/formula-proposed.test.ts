import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { pullResponse } from '#contract/pull.ts';
import type { Row } from '#contract/rows.ts';
import { inShop } from '#server/db/in-shop.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import {
  closePushStation,
  db,
  now,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

type Proposed = Extract<OperationBody, { type: 'formula-proposed' }>;
let base: { formulaId: string; revision: number; familyId: string; componentIds: string[] };

beforeAll(async () => {
  await openPushStation();
  base = await inShop(db, shopId, async (trx) => {
    const { formulaId, revision, familyId } = await trx
      .selectFrom('formulaRevisions')
      .select(['formulaId', 'revision', 'familyId'])
      .where('state', '=', 'approved')
      .orderBy('formulaId')
      .limit(1)
      .executeTakeFirstOrThrow();
    const parts = await trx
      .selectFrom('formulaParts')
      .select('componentId')
      .where('formulaId', '=', formulaId)
      .where('revision', '=', revision)
      .orderBy('position')
      .execute();
    return { formulaId, revision, familyId, componentIds: parts.map(({ componentId }) => componentId) };
  });
}, 120_000);
afterAll(closePushStation);

function proposed(parts: readonly string[], given: Partial<Proposed['body']> = {}): Proposed {
  const { formulaId, revision: baseRevision, familyId, componentIds } = base;
  return {
    type: 'formula-proposed',
    body: {
      formulaId,
      baseRevision,
      familyId,
      parts: parts.map((text, n) => ({ componentId: componentIds[n] ?? uuid(), parts: text })),
      note: null,
      ...given,
    },
  };
}

/** The formula as a station fetches it. */
async function pulled(): Promise<Row<'formulas'>> {
  let cursor = '';
  for (;;) {
    const page = pullResponse.parse(await pullChanges(db, shopId, { cursor, limit: 500, installId: undefined, now }));
    for (const change of page.changes)
      if (change.id === base.formulaId && 'row' in change) return change.row as Row<'formulas'>;
    if (!page.more) throw new Error('The formula was not among the rows.');
    cursor = page.cursor;
  }
}

test('a formula that two stations edited on the same base is kept twice, each a draft as it was written, the approved one first', async () => {
  const one = record(proposed(['90', '10.5'], { note: 'Warmer' }), 'mixer');
  const other = record(proposed(['88', '12'], { name: 'Dusk, warmer' }), 'manager');
  const results = await push([one, other]);
  const [first, second] = [base.revision + 1, base.revision + 2];
  expect(results).toMatchObject([
    { outcome: 'accepted', revision: first },
    { outcome: 'accepted', revision: second },
  ]);
  const { revisions } = await pulled();
  const kept = revisions.filter(({ baseRevision }) => baseRevision === base.revision);
  expect(revisions[0]).toMatchObject({ revision: base.revision, state: 'approved' });
  expect(kept).toMatchObject([
    { revision: second, state: 'draft', name: 'Dusk, warmer', note: null, proposedBy: other.actorId },
    { revision: first, state: 'draft', name: null, note: 'Warmer', proposedBy: one.actorId },
  ]);
  expect(kept.map(({ parts }) => parts.map((part) => part.parts))).toEqual([
    ['88', '12'],
    ['90', '10.5'],
  ]);
  expect((await push([one]))[0]).toMatchObject({ outcome: 'duplicate', revision: first });
});

test('a draft may be edited in turn, in the same push; one whose base has not arrived is sent again', async () => {
  const newest = (await pulled()).revisions.reduce((most, { revision }) => Math.max(most, revision), 0);
  const early = record(proposed(['70', '30'], { baseRevision: newest + 1 }), 'mixer');
  expect(await push([early])).toMatchObject([{ outcome: 'retry' }]);
  const results = await push([record(proposed(['75', '25']), 'mixer'), early]);
  expect(results).toMatchObject([{ revision: newest + 1 }, { revision: newest + 2 }]);
  expect((await pulled()).revisions.find(({ revision }) => revision === newest + 2)).toMatchObject({
    baseRevision: newest + 1,
    parts: [{ parts: '70' }, { parts: '30' }],
  });
});

test.each<[string, () => Partial<Proposed['body']>, string]>([
  ['of a formula of no shop', () => ({ formulaId: uuid() }), 'no-such-formula'],
  ['in a family of no shop', () => ({ familyId: uuid() }), 'no-such-family'],
  ['with a component of no shop', () => ({ parts: [{ componentId: uuid(), parts: '1' }] }), 'no-such-component'],
  [
    'with a component that stands twice',
    () => ({ parts: [1, 2].map(() => ({ componentId: base.componentIds[0] ?? '', parts: '1' })) }),
    'sum',
  ],
  [
    'with nothing of a component',
    () => ({ parts: [{ componentId: base.componentIds[0] ?? '', parts: '0.0' }] }),
    'unreadable',
  ],
])('a proposal %s is refused and kept', async (_, given, code) => {
  const operation = record(proposed(['1'], given()), 'mixer');
  expect(await push([operation])).toMatchObject([{ outcome: 'rejected', problem: { code } }]);
  expect(await quarantined(operation.opId)).toEqual([code]);
});

test('an operator may not propose a formula', async () => {
  expect(await push([record(proposed(['1']), 'operator')])).toMatchObject([{ problem: { code: 'wrong-role' } }]);
});
