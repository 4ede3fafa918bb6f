import type { SignInResponse } from '#contract/sign-in.ts';
import type { Database } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import type { SignedIn } from './sessions.ts';
import { type Deps, admit } from './sign-in.ts';
import type { KnownStation } from './stations.ts';

/** A fresh grant for a person whose session lives, on the station that the install belongs to. @throws HttpProblem */
export async function renewGrant(
  db: Database,
  person: SignedIn,
  station: KnownStation | undefined,
  installId: string,
  deps: Deps,
): Promise<SignInResponse> {
  if (station === undefined || station.revoked || station.shopId !== person.shopId) {
    throw new HttpProblem(401, 'no-station', 'No station', 'Sign in on this device again.');
  }
  return inShop(db, person.shopId, async (trx) => {
    const install = await trx
      .selectFrom('installs')
      .select(['id', 'codePrefix', 'lastSeq'])
      .where('shopId', '=', person.shopId)
      .where('stationId', '=', station.stationId)
      .where('id', '=', installId)
      .executeTakeFirst();
    if (install === undefined) throw new HttpProblem(404, 'no-install', 'No install', 'Sign in on this device again.');
    return admit(trx, { person, station, install, isNew: false }, deps);
  });
}
