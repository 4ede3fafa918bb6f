import { v7 as uuidv7 } from 'uuid';
import { pushRequest } from '#contract/push.ts';
import { openStation, saveSignIn, type Browser, type Station } from '#offline/station.ts';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { seedWhenEmpty } from '#scripts/prepare-database.mjs';
import { signIn } from '#server/auth/sign-in.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { HttpProblem, problemResponse } from '#server/http/http-problem.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import { pullChanges } from '#server/sync/pull-changes.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';
import { makeBrowser } from '#tests/support/station.ts';

const real = { now: () => new Date(), randomId: uuidv7 };

/** The server's side of a simulation: a demo shop in a database of its own, its handlers, and stations that enrol. */
export interface SimulatedShop {
  db: Database;
  shopId: string;
  enrol: () => Promise<SimulatedStation>;
  close: () => Promise<void>;
}

export interface SimulatedStation {
  stationId: string;
  browser: Browser;
  /** As it is open now; a killed tab opens another on the same disk. */
  open: Station;
  handlers: typeof fetch;
}

export async function openSimulatedShop(): Promise<SimulatedShop> {
  const database = await makeFreshDatabase();
  await seedWhenEmpty(database);
  process.env['DATABASE_URL'] = database.appUrl;
  process.env['GRANT_KEYS'] ??= makeGrantKeys();
  const db = openDatabase(database.appUrl);
  const enrol = async (): Promise<SimulatedStation> => {
    const [mixer] = demoSignIns as [(typeof demoSignIns)[number]];
    const request = { email: mixer.email, password: mixer.password, installIds: [], newInstallId: uuidv7() };
    const { response } = await signIn(db, request, undefined, real);
    const browser = makeBrowser(real.now());
    const open = await saveSignIn(response, browser);
    const stationId = response.station.id;
    return { stationId, browser, open, handlers: handlersOf(db, response.shop.id, stationId) };
  };
  const { open } = await enrol();
  const close = async () => {
    await db.destroy();
    await database.drop();
  };
  return { db, shopId: open.shop.id, enrol, close };
}

/** The tab is gone in the middle of whatever it did; the disk stays. */
export async function killTab(station: SimulatedStation): Promise<void> {
  station.open.cache.close();
  station.open.outbox.close();
  const again = await openStation(station.browser);
  if (again === undefined) throw new Error('The station could not be opened again.');
  station.open = again;
}

/** As the routes answer, without HTTP between. */
export function handlersOf(db: Database, shopId: string, stationId: string): typeof fetch {
  const answer: typeof fetch = async (input, init) => {
    const url = new URL(String(input), 'http://shop.example');
    if (url.pathname === '/api/sync/push') {
      const push = pushRequest.parse(JSON.parse(String(init?.body)));
      return Response.json(await applyPush(db, { shopId, stationId }, push, real));
    }
    if (url.pathname !== '/api/sync/pull') return new Response('', { status: 401 });
    const cursor = url.searchParams.get('cursor') ?? '';
    const installId = url.searchParams.get('install') ?? undefined;
    return Response.json(await pullChanges(db, shopId, { cursor, limit: 200, installId, now: real.now() }));
  };
  return (input, init) =>
    answer(input, init).catch((error: unknown) => {
      if (error instanceof HttpProblem) return problemResponse(error.problem, error.headers);
      throw error;
    });
}
