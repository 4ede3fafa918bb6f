import { sql } from 'kysely';
import type { SignInRequest, SignInResponse } from '#contract/sign-in.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { issueGrant, publicGrantKeys } from './grants.ts';
import { findLostInstalls } from './lost-installs.ts';
import { checkPassword } from './passwords.ts';
import { type SignedIn, findPerson, startSession } from './sessions.ts';
import { type Install, type KnownStation, enrolStation, requireInstall } from './stations.ts';

export interface Deps {
  now: () => Date;
  randomId: () => string;
}

interface Admitted {
  response: SignInResponse;
  sessionCookie: string;
  /** Set when this browser has just become a station. */
  stationCookie: string | undefined;
}

/** Checks the password and opens session, station, install and grant. @throws HttpProblem 401 */
export async function signIn(
  db: Database,
  request: SignInRequest,
  known: KnownStation | undefined,
  deps: Deps,
): Promise<Admitted> {
  const found = await sql<{ shopId: string; personId: string; passwordHash: string }>`
    select * from find_sign_in(${request.email})`.execute(db);
  const account = found.rows[0];
  if (!(await checkPassword(request.password, account?.passwordHash)) || account === undefined) {
    throw new HttpProblem(401, 'wrong-sign-in', 'Not signed in', 'E-mail or password is wrong. Try again.');
  }
  const { shopId, personId } = account;
  return inShop(db, shopId, async (trx) => {
    const now = deps.now();
    const person = await findPerson(trx, shopId, personId);
    if (person === undefined)
      throw new HttpProblem(401, 'wrong-sign-in', 'Not signed in', 'E-mail or password is wrong. Try again.');
    const kept = known?.shopId === shopId && !known.revoked ? known : undefined;
    const enrolled = kept === undefined ? await enrolStation(trx, shopId, deps.randomId(), now) : undefined;
    const station = kept ?? (enrolled as NonNullable<typeof enrolled>).station;
    const install = await requireInstall(trx, station, request.installIds, request.newInstallId);
    const sessionCookie = await startSession(trx, shopId, personId, now);
    await trx
      .insertInto('audit')
      .values({
        shopId,
        id: deps.randomId(),
        at: now,
        actorId: personId,
        kind: 'signed-in',
        detail: JSON.stringify({ station: station.stationId }),
      })
      .execute();
    const response = await admit(trx, { person, station, install, isNew: kept === undefined }, deps);
    const lost = await findLostInstalls(trx, { station, install, offered: request.installIds, person }, deps);
    if (lost.length > 0) response.lost = lost;
    return { response, sessionCookie, stationCookie: enrolled?.cookie };
  });
}

/** What a station needs to open again without a network. */
export async function admit(
  trx: ShopTransaction,
  { person, station, install, isNew }: { person: SignedIn; station: KnownStation; install: Install; isNew: boolean },
  deps: Deps,
): Promise<SignInResponse> {
  const now = deps.now();
  const shop = await trx
    .selectFrom('shops')
    .select(['id', 'name', 'locale'])
    .where('id', '=', person.shopId)
    .executeTakeFirstOrThrow();
  return {
    serverTime: now.toISOString(),
    shop,
    person: { id: person.personId, displayName: person.displayName, role: person.role },
    station: { id: station.stationId, name: station.name, isNew },
    install,
    grant: await issueGrant(trx, person, station.stationId, deps.randomId(), now),
    keys: publicGrantKeys(),
  };
}
