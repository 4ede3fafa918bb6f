import { v7 as uuidv7 } from 'uuid';
import { pushRequest } from '#contract/push.ts';
import { type Station, saveSignIn } from '#offline/station.ts';
import type { SyncDeps } from '#offline/sync-result.ts';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { seedWhenEmpty } from '#scripts/prepare-database.mjs';
import { signIn } from '#server/auth/sign-in.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { HttpProblem, problemResponse } from '#server/http/http-problem.ts';
import { type PushStation, applyPush } from '#server/sync/apply-push.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import type { TestDatabase } from '#tests/support/postgres.ts';
import { makeBrowser } from '#tests/support/station.ts';

/** The time as the server has it, and as the device does. */
export interface Clocks {
  server: () => Date;
  device: () => Date;
}
const now = () => new Date();

/** The demo mixer's station and the real handlers on a database of its own, without HTTP between them. */
export async function openDemoStation(clocks: Clocks = { server: now, device: now }): Promise<{
  station: Station;
  deps: SyncDeps;
  db: Database;
  database: TestDatabase;
  close: () => Promise<void>;
}> {
  const database = await makeFreshDatabase();
  await seedWhenEmpty(database);
  process.env['DATABASE_URL'] = database.appUrl;
  process.env['GRANT_KEYS'] = makeGrantKeys();
  const db = openDatabase(database.appUrl);
  const [mixer] = demoSignIns;
  const { email, password } = mixer as (typeof demoSignIns)[number];
  const request = { email, password, installIds: [], newInstallId: uuidv7() };
  const { response } = await signIn(db, request, undefined, { now: clocks.server, randomId: uuidv7 });
  const station = await saveSignIn(response, makeBrowser(clocks.device()));
  const close = async () => {
    await db.destroy();
    await database.drop();
  };
  const fetch = handlers(db, { shopId: response.shop.id, stationId: response.station.id }, clocks.server);
  return { station, deps: { now: clocks.device, randomId: uuidv7, fetch }, db, database, close };
}

function handlers(...given: Parameters<typeof answers>): typeof fetch {
  const answer = answers(...given);
  return (input, init) =>
    answer(input, init).catch((error: unknown) => {
      if (error instanceof HttpProblem) return problemResponse(error.problem, error.headers);
      throw error;
    });
}

function answers(db: Database, station: PushStation, now: () => Date): typeof fetch {
  return async (input, init) => {
    const url = new URL(String(input), 'http://shop.example');
    if (url.pathname === '/api/sync/push') {
      const push = pushRequest.parse(JSON.parse(String(init?.body)));
      return Response.json(await applyPush(db, station, push, { now, randomId: uuidv7 }));
    }
    const cursor = url.searchParams.get('cursor') ?? '';
    const installId = url.searchParams.get('install') ?? undefined;
    return Response.json(await pullChanges(db, station.shopId, { cursor, limit: 500, installId, now: now() }));
  };
}
