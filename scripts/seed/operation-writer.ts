import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Operation } from '#contract/operation.ts';
import { LARGEST_PUSH_OPERATIONS, PROTOCOL } from '#contract/push.ts';
import type { Database } from '#server/db/connection.ts';
import { applyPush } from '#server/sync/apply-push.ts';
import type { Random } from './random.ts';

export interface Writer {
  write: (body: OperationBody, at: Date, actorId: string) => void;
  /** Sends everything in order; every operation must be accepted. */
  send: (db: Database) => Promise<void>;
}

interface Install {
  shopId: string;
  stationId: string;
  installId: string;
  /** Grant of each person. */
  grants: ReadonlyMap<string, string>;
}

/** Records the demo shop's past as a station would have, through the same door. */
export function operationWriter(install: Install, random: Random): Writer {
  const operations: Operation[] = [];
  const write: Writer['write'] = (body, at, actorId) => {
    operations.push({
      opId: random.uuid(),
      installId: install.installId,
      deviceSeq: operations.length + 1,
      opVersion: 1,
      actorId,
      grantId: install.grants.get(actorId) as string,
      grantLapsed: false,
      deviceTime: at.toISOString(),
      clock: { offsetMs: 0, uncertaintyMs: 50, lastContact: at.toISOString() },
      seen: {},
      ...body,
    });
  };
  const send: Writer['send'] = async (db) => {
    for (let n = 0; n < operations.length; n += LARGEST_PUSH_OPERATIONS) {
      const ops = operations.slice(n, n + LARGEST_PUSH_OPERATIONS);
      const last = new Date((ops.at(-1) as Operation).deviceTime);
      const push = { protocol: PROTOCOL, requestId: random.uuid(), ops } as const;
      const answer = await applyPush(db, install, push, { now: () => last, randomId: random.uuid });
      const refused = answer.results.find((result) => result.outcome !== 'accepted');
      if (refused !== undefined) throw new Error(`The demo shop's past was refused: ${JSON.stringify(refused)}`);
    }
  };
  return { write, send };
}
