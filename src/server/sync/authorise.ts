import type { Operation } from '#contract/operation.ts';
import { type Role, mayRecord } from '#contract/roles.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { RejectedError } from './apply-context.ts';

/** By the role in the grant that the operation names, issued for this station and this person. @throws RejectedError */
export async function requireAuthorised(
  trx: ShopTransaction,
  shopId: string,
  stationId: string,
  operation: Operation,
): Promise<void> {
  const install = await trx
    .selectFrom('installs')
    .select('id')
    .where('shopId', '=', shopId)
    .where('id', '=', operation.installId)
    .where('stationId', '=', stationId)
    .executeTakeFirst();
  if (install === undefined) throw new RejectedError('wrong-station', 'This entry was recorded on another device.');
  const grant = await trx
    .selectFrom('grants')
    .select('role')
    .where('shopId', '=', shopId)
    .where('id', '=', operation.grantId)
    .where('stationId', '=', stationId)
    .where('personId', '=', operation.actorId)
    .executeTakeFirst();
  if (grant === undefined) throw new RejectedError('no-grant', 'Whoever recorded this was not signed in here.');
  if (!mayRecord(grant.role as Role, operation.type)) {
    throw new RejectedError('wrong-role', `A ${grant.role} may not record this. Ask a manager.`);
  }
}
