import { pushRequest, type PushRequest } from '#contract/push.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import { recordOperation, takeBucketCode } from '#offline/record-operation.ts';
import { readBatches, readShelf } from '#offline/shown.ts';
import { type Station, saveSignIn } from '#offline/station.ts';
import { syncOnce } from '#offline/sync-once.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { batchMixed, fresh, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { START, makeBrowser, makeSignIn } from '#tests/support/station.ts';
import { seededIds } from './simulated-ids.ts';
import { type Enrolled, type SimulatedShop, mg } from './simulated-shop.ts';

/** A push as it reached the server. */
export interface Recorded {
  stationId: string;
  push: PushRequest;
}

/** Later than any entry, so that the time of arrival changes nothing. */
export const RECEIVED = new Date(START.getTime() + 86_400_000);

type Tub = Row<'buckets'>;

/** What stations of a shop record on two tubs and send at odd times, each push as it reached the server. */
export async function recordPushes(shop: SimulatedShop, seed: number, entries: number): Promise<Recorded[]> {
  const random = seededRandom(seed);
  const recorded: Recorded[] = [];
  const desks = [];
  for (const enrolled of shop.enrolled) desks.push(await openDesk(shop, enrolled, random, recorded));
  const hot: string[] = [];
  for (const desk of desks.slice(0, 2)) hot.push(await desk.fill());
  for (const desk of desks) await desk.sync();
  for (let n = 0; n < entries; n++) {
    await random.pick(desks).act(random.pick(hot));
    if (random.next() < 0.25) await random.pick(desks).sync();
  }
  for (const desk of desks) await desk.sync();
  return recorded;
}

async function openDesk(shop: SimulatedShop, enrolled: Enrolled, random: Random, recorded: Recorded[]) {
  const { shopId, personId } = shop;
  const { stationId, installId, grantId } = enrolled;
  const grant = { claims: { jti: grantId, station: stationId } };
  const response = await makeSignIn({ shopId, personId, installId, grant });
  response.station.id = stationId;
  response.install.codePrefix = enrolled.codePrefix;
  const station = await saveSignIn(response, makeBrowser());
  const deps = { now: () => START, randomId: seededIds(random, () => START.getTime()) };
  const server = async (input: Parameters<typeof globalThis.fetch>[0], init?: RequestInit) => {
    const url = new URL(String(input), 'http://shop.example');
    const cursor = url.searchParams.get('cursor') ?? '';
    if (url.pathname !== '/api/sync/push')
      return Response.json(await pullChanges(shop.db, shopId, { cursor, limit: 500, installId, now: RECEIVED }));
    const push = pushRequest.parse(JSON.parse(String(init?.body)));
    recorded.push({ stationId, push });
    return Response.json(await applyPush(shop.db, { shopId, stationId }, push, { ...deps, now: () => RECEIVED }));
  };
  const record = (body: OperationBody) => recordOperation(station, body, deps);
  return {
    sync: () => syncOnce(station, { ...deps, fetch: server }, () => {}),
    fill: async () => {
      const body = await mixed(shop, station, deps.randomId, [fresh(shop.componentIds[0], 900_000)]);
      await record(body);
      return body.body.filled[0]?.bucketId ?? '';
    },
    act: async (tubId: string) => {
      const tub = (await readShelf(station)).find(({ id }) => id === tubId);
      if (tub === undefined) return;
      const body = await anyAct(shop, station, tub, random, deps.randomId);
      if (body !== undefined) await record(body);
    },
  };
}

async function mixed(
  { formulaId, containerId }: SimulatedShop,
  station: Station,
  randomId: () => string,
  additions: Parameters<typeof batchMixed>[0],
) {
  const body = batchMixed(additions.map((addition) => ({ ...addition, actorId: station.person.id })));
  Object.assign(body.body, { batchId: randomId(), formulaId });
  for (const tub of body.body.filled)
    Object.assign(tub, { bucketId: randomId(), containerId, code: await takeBucketCode(station) });
  return body;
}

const KINDS = ['place', 'nowhere', 'count', 'back', 'out', 'use', 'use', 'scrape', 'discard', 'release'] as const;

async function anyAct(
  shop: SimulatedShop,
  station: Station,
  tub: Tub,
  random: Random,
  randomId: () => string,
): Promise<OperationBody | undefined> {
  const kind = random.pick(KINDS);
  const net = 1000 * random.int(0, 400);
  const weighed = { grossMg: mg(tub.tareMg + net), tareMg: mg(tub.tareMg), displayedMg: tub.balanceMg };
  const change = { ...weighed, deltaMg: net - tub.balanceMg };
  if (kind === 'place') return relocated(tub.id, random.pick(shop.locationIds));
  if (kind === 'nowhere') return relocated(tub.id, shop.formulaId);
  if (kind === 'count') return { type: 'bucket-recounted', body: { bucketId: tub.id, ...change } };
  if (kind === 'back') return returned(tub.id, { ...change, condition: random.pick(['clean', 'dirty']) });
  if (kind === 'out') {
    const overrideReason = tub.released ? null : 'Rush';
    return { type: 'bucket-issued', body: { bucketId: tub.id, jobId: null, overrideReason } };
  }
  if (kind === 'discard') {
    const body = { bucketId: tub.id, displayedMg: tub.balanceMg, reason: 'Other', note: null };
    return random.next() < 0.3 ? { type: 'bucket-discarded', body } : undefined;
  }
  if (kind === 'release') {
    const batch = (await readBatches(station)).find(({ id }) => id === tub.batchId);
    if (batch?.state !== 'mixed') return undefined;
    const release = { light: `Light of ${station.installId}`, byEye: true, at: START.toISOString() };
    return { type: 'batch-released', body: { batchId: batch.id, release } };
  }
  const { balanceMg, grade, generation } = tub;
  const taken = {
    ...fromTub(tub.id, 1000 * random.int(1, 60), kind === 'scrape'),
    displayed: { balanceMg, grade, generation },
  };
  return mixed(shop, station, randomId, [taken as ReturnType<typeof fromTub>, fresh(shop.componentIds[1], 20_000)]);
}
