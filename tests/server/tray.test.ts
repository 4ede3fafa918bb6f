import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Role } from '#contract/roles.ts';
import { inShop } from '#server/db/in-shop.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import {
  aBatch,
  actor,
  closePushStation,
  db,
  mg,
  now,
  openPushStation,
  push,
  quarantined,
  record,
  shopId,
} from '#tests/support/push-station.ts';

beforeAll(openPushStation, 120_000);
afterAll(closePushStation);

const drop = (opId: string, reason = 'Typed twice'): OperationBody => ({
  type: 'entry-dropped',
  body: { opId, reason },
});
const correct = (opId: string, body: OperationBody, role: Role = 'mixer') => ({
  ...record(body, role),
  supersedes: opId,
});

/** What was filled is not what was weighed in: refused, until the last addition is back. */
async function aWrongBatch() {
  const right = await aBatch();
  const wrong = structuredClone(right);
  wrong.body.additions.pop();
  return { right, wrong };
}

async function refuse(body: OperationBody, role: Role = 'mixer') {
  const entry = record(body, role);
  expect(await push([entry])).toMatchObject([{ outcome: 'rejected' }]);
  return entry;
}

const resolvers = (opId: string) =>
  inShop(db, shopId, async (trx) => {
    const rows = await trx
      .selectFrom('quarantine')
      .select('resolvedBy')
      .where('shopId', '=', shopId)
      .where('opId', '=', opId)
      .execute();
    return rows.map(({ resolvedBy }) => resolvedBy);
  });
const outcomes = async (...ops: unknown[]) =>
  (await push(ops)).map((result) => (result.outcome === 'rejected' ? result.problem.code : result.outcome));
const nowhere = (): OperationBody => ({ type: 'bucket-relocated', body: { bucketId: uuid(), locationId: uuid() } });

describe('an entry that corrects a refused one', () => {
  test('settles it when it is accepted', async () => {
    const { right, wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    expect(await resolvers(first.opId)).toEqual([null]);
    const second = correct(first.opId, right);
    expect(await outcomes(second)).toEqual(['accepted']);
    expect(await resolvers(first.opId)).toEqual([second.opId]);
    expect(await quarantined(first.opId)).toEqual(['sum']);
  });

  test('takes its place when it is refused in its turn: one decision is open, not two; the next one settles it', async () => {
    const { right, wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const second = correct(first.opId, wrong);
    expect(await outcomes(second)).toEqual(['sum']);
    expect([await resolvers(first.opId), await resolvers(second.opId)]).toEqual([[second.opId], [null]]);
    const third = correct(second.opId, right);
    expect(await outcomes(third)).toEqual(['accepted']);
    expect(await resolvers(second.opId)).toEqual([third.opId]);
  });

  test('is refused when another one corrected the same entry, in an earlier push or in this one', async () => {
    const { right, wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const other = await aBatch();
    expect(await outcomes(correct(first.opId, right), correct(first.opId, other))).toEqual([
      'accepted',
      'corrected-already',
    ]);
    expect(await outcomes(correct(first.opId, other))).toEqual(['corrected-already']);
  });

  test('is refused when the first one was accepted after all', async () => {
    const first = record(await aBatch(), 'mixer');
    expect(await outcomes(first)).toEqual(['accepted']);
    expect(await outcomes(correct(first.opId, await aBatch()))).toEqual(['original-accepted']);
  });

  test('takes its place also when it cannot be read', async () => {
    const { right, wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const [addition] = right.body.additions;
    Object.assign(addition ?? {}, { actualMg: mg(0) });
    const second = correct(first.opId, right);
    expect(await outcomes(second)).toEqual(['unreadable']);
    expect(await resolvers(first.opId)).toEqual([second.opId]);
  });

  test('settles nothing of an entry of another shop', async () => {
    const entry = correct(uuid(), await aBatch());
    expect(await outcomes(entry)).toEqual(['accepted']);
  });
});

describe('an entry that drops a refused one', () => {
  test('settles it, stays in the log and is audited with its reason, once', async () => {
    const { wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const dropped = record(drop(first.opId, 'Never left the bench'), 'mixer');
    expect(await outcomes(dropped)).toEqual(['accepted']);
    expect(await outcomes(dropped)).toEqual(['duplicate']);
    expect(await resolvers(first.opId)).toEqual([dropped.opId]);
    const audit = await inShop(db, shopId, (trx) =>
      trx.selectFrom('audit').select(['actorId', 'detail']).where('kind', '=', 'entry-dropped').execute(),
    );
    expect(audit.filter(({ detail }) => (detail as { opId: string }).opId === first.opId)).toMatchObject([
      { actorId: actor('mixer').personId, detail: { by: dropped.opId, reason: 'Never left the bench' } },
    ]);
  });

  test.each<[Role, string]>([
    ['mixer', 'accepted'],
    ['manager', 'accepted'],
    ['owner', 'accepted'],
    ['operator', 'wrong-role'],
    ['planner', 'wrong-role'],
  ])('of a batch by a %s: %s', async (role, outcome) => {
    const { wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const dropped = record(drop(first.opId), role);
    expect(await outcomes(dropped)).toEqual([outcome]);
    // A refused drop stands for what it meant to drop, so that one decision stays open.
    expect(await resolvers(first.opId)).toEqual([dropped.opId]);
    expect(await resolvers(dropped.opId)).toEqual(outcome === 'accepted' ? [] : [null]);
  });

  test('of a move may come from an operator', async () => {
    const first = await refuse(nowhere(), 'operator');
    expect(await outcomes(record(drop(first.opId), 'operator'))).toEqual(['accepted']);
  });

  test('needs a reason', async () => {
    const first = await refuse(nowhere());
    expect(await outcomes(record(drop(first.opId, ''), 'mixer'))).toEqual(['unreadable']);
    expect(await resolvers(first.opId)).toEqual([null]);
  });
});

describe('a refused entry that is sent again', () => {
  test('is refused as it was, even when it could be taken by now: its station shows it for a decision', async () => {
    const batch = await aBatch();
    const bucketId = batch.body.filled[0]?.bucketId ?? '';
    const early = record({ type: 'bucket-issued', body: { bucketId, jobId: null, overrideReason: null } }, 'operator');
    expect(await outcomes(early)).toEqual(['no-such-tub']);
    await push([record(batch, 'mixer')]);
    expect(await outcomes(early)).toEqual(['no-such-tub']);
    expect(await resolvers(early.opId)).toEqual([null]);
  });

  test.each(['corrected', 'dropped'])('is let go when it was %s: it opens no second decision', async (how) => {
    const { right, wrong } = await aWrongBatch();
    const first = await refuse(wrong);
    const settling = how === 'corrected' ? correct(first.opId, right) : record(drop(first.opId), 'mixer');
    expect(await outcomes(settling)).toEqual(['accepted']);
    expect(await outcomes(first)).toEqual(['settled-already']);
    expect(await resolvers(first.opId)).toEqual([settling.opId]);
  });

  test('as a copy that another station read from a file is refused there and decides nothing for the station that holds it', async () => {
    const entry = record(await aBatch(), 'mixer');
    const other = await addStation();
    expect(await pushFrom(other, entry)).toEqual(['wrong-station']);
    expect(await outcomes(entry)).toEqual(['accepted']);
    expect(await quarantined(entry.opId)).toEqual(['wrong-station']);
  });
});

describe('after a while of refusals, corrections and drops', () => {
  test('the refusals that nobody settled are those that the station still shows', async () => {
    const other = await addStation();
    const shown = new Set<string>();
    const entries = [];
    for (let n = 0; n < 6; n++) entries.push((await aWrongBatch()).wrong);
    for (const [n, body] of entries.entries()) {
      const entry = onStation(other, record(body, 'mixer'));
      expect(await pushFrom(other, entry)).toEqual(['sum']);
      shown.add(entry.opId);
      const next = [
        () => undefined,
        () => onStation(other, record(drop(entry.opId), 'mixer')),
        () => onStation(other, correct(entry.opId, body)),
      ][n % 3]?.();
      if (next === undefined) continue;
      shown.delete(entry.opId);
      const [outcome] = await pushFrom(other, next);
      if (outcome !== 'accepted') shown.add(next.opId);
    }
    const open = await inShop(db, shopId, (trx) =>
      trx
        .selectFrom('quarantine')
        .select('opId')
        .where('stationId', '=', other.stationId)
        .where('resolvedBy', 'is', null)
        .execute(),
    );
    expect(new Set(open.map(({ opId }) => opId))).toEqual(shown);
    expect(shown.size).toBe(4);
  });
});

interface OtherStation {
  stationId: string;
  installId: string;
  grantId: string;
}

let stations = 0;

/** One more station of the shop, on which the mixer works. */
async function addStation(): Promise<OtherStation> {
  const added = { stationId: uuid(), installId: uuid(), grantId: uuid() };
  const codePrefix = `X${'ACDEFG'[stations++]}`;
  const far = new Date('2027-06-01T00:00:00Z');
  await inShop(db, shopId, async (trx) => {
    const tokenSha256 = Buffer.alloc(32, stations);
    await trx
      .insertInto('stations')
      .values({ shopId, id: added.stationId, name: `Other ${stations}`, tokenSha256, expiresAt: far, lastSeen: now })
      .execute();
    await trx
      .insertInto('installs')
      .values({ shopId, id: added.installId, stationId: added.stationId, codePrefix })
      .execute();
    const grant = { shopId, id: added.grantId, stationId: added.stationId, personId: actor('mixer').personId };
    await trx
      .insertInto('grants')
      .values({ ...grant, role: 'mixer', issuedAt: now, expiresAt: far })
      .execute();
  });
  return added;
}

const onStation = ({ installId, grantId }: OtherStation, entry: ReturnType<typeof record>) => ({
  ...entry,
  installId,
  grantId,
});

async function pushFrom({ stationId }: OtherStation, ...ops: unknown[]): Promise<string[]> {
  const request = { protocol: 1 as const, requestId: uuid(), ops };
  const answer = await applyPush(db, { shopId, stationId }, request, { now: () => now, randomId: uuid });
  return answer.results.map((result) => (result.outcome === 'rejected' ? result.problem.code : result.outcome));
}
