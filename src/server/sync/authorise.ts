import type { Operation } from '#contract/operation.ts';
import { type Role, mayRecord } from '#contract/roles.ts';
import { RejectedError } from './apply-context.ts';
import type { PushFacts } from './push-facts.ts';

/**
 * By the role in the grant that the operation names, issued for this station and this person.
 * @returns that role
 * @throws RejectedError
 */
export function requireAuthorised({ installs, grants }: PushFacts, operation: Operation): Role {
  if (!installs.has(operation.installId))
    throw new RejectedError('wrong-station', 'This entry was recorded on another device.');
  const grant = grants.get(operation.grantId);
  if (grant?.personId !== operation.actorId)
    throw new RejectedError('no-grant', 'Whoever recorded this was not signed in here.');
  if (!mayRecord(grant.role as Role, operation.type)) {
    throw new RejectedError('wrong-role', `A ${grant.role} may not record this. Ask a manager.`);
  }
  return grant.role as Role;
}
