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
import { applyPush } from '#server/sync/apply-push.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import type { TestDatabase } from '#tests/support/postgres.ts';
import { makeBrowser } from '#tests/support/station.ts';

const real = { now: () => new Date(), randomId: uuidv7 };

/** The demo mixer's station and the real handlers on a database of its own, without HTTP between them. */
export async function openDemoStation(): Promise<{
  station: Station;
  deps: SyncDeps;
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
  const { response } = await signIn(db, request, undefined, real);
  const station = await saveSignIn(response, makeBrowser(real.now()));
  const close = async () => {
    await db.destroy();
    await database.drop();
  };
  return { station, deps: { ...real, fetch: handlers(db, response.shop.id, response.station.id) }, database, close };
}

function handlers(db: Database, shopId: string, stationId: string): typeof fetch {
  const answer = answers(db, shopId, stationId);
  return (input, init) =>
    answer(input, init).catch((error: unknown) => {
      if (error instanceof HttpProblem) return problemResponse(error.problem, error.headers);
      throw error;
    });
}

function answers(db: Database, shopId: string, stationId: string): typeof fetch {
  return async (input, init) => {
    const url = new URL(String(input), 'http://shop.example');
    if (url.pathname === '/api/sync/push') {
      const push = pushRequest.parse(JSON.parse(String(init?.body)));
      return Response.json(await applyPush(db, { shopId, stationId }, push, real));
    }
    const cursor = url.searchParams.get('cursor') ?? '';
    const installId = url.searchParams.get('install') ?? undefined;
    return Response.json(await pullChanges(db, shopId, { cursor, limit: 500, installId, now: real.now() }));
  };
}
