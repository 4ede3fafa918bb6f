import { sql } from 'kysely';
import type { Operation } from '#contract/operation.ts';
import { type OperationType, operationBodies } from '#contract/operation-bodies.ts';
import { type Problem, SETTLED } from '#contract/problem.ts';
import { type Role, mayRecord } from '#contract/roles.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { RejectedError } from './apply-context.ts';
import type { PushStation, Received } from './apply-push.ts';

interface RefusedRow {
  opId: string;
  hash: Buffer;
  stationId: string;
  problem: Problem;
  /** Null when it was not readable. */
  type: string | null;
  resolvedBy: string | null;
  /** Null when nothing resolved it, or an entry that was refused in its turn. */
  resolverType: string | null;
}

/** What an entry lets go of: the one it corrects, or the one it drops. */
export function settledBy(operation: Operation): string | undefined {
  return operation.type === 'entry-dropped' ? operation.body.opId : operation.supersedes;
}

/** What the shop refused of the entries that a push sends again, corrects or drops, as it stands under the shop's lock. */
export class RefusedEntries {
  private readonly rows: readonly RefusedRow[];
  /** Of those that are corrected, which were accepted after all; those of this push are added. */
  private readonly accepted: Set<string>;
  /** Corrected by an entry of this push. */
  private readonly corrected = new Set<string>();

  private constructor(rows: readonly RefusedRow[], accepted: Iterable<string>) {
    this.rows = rows;
    this.accepted = new Set(accepted);
  }

  static async read(trx: ShopTransaction, shopId: string, received: readonly Received[]): Promise<RefusedEntries> {
    const settled = received.flatMap(({ parsed }) =>
      'operation' in parsed ? (settledBy(parsed.operation) ?? []) : [],
    );
    const named = [...received.map(({ opId }) => opId), ...settled];
    const { rows } = await sql<RefusedRow>`
      select q.op_id, q.hash, q.station_id, q.problem, q.raw ->> 'type' as type, q.resolved_by,
        (select r.type from operations r where r.shop_id = q.shop_id and r.op_id = q.resolved_by) as resolver_type
      from quarantine q where q.shop_id = ${shopId} and q.op_id = any (${named}::uuid[])`.execute(trx);
    if (settled.length === 0) return new RefusedEntries(rows, []);
    const accepted = await trx
      .selectFrom('operations')
      .select('opId')
      .where('shopId', '=', shopId)
      .where('opId', 'in', settled)
      .execute();
    return new RefusedEntries(
      rows,
      accepted.map(({ opId }) => opId),
    );
  }

  /** An entry that is sent again is refused as it was; one that somebody settled is let go. @throws RejectedError */
  requireNew({ opId, hash }: Received, { stationId }: PushStation): void {
    for (const row of this.rows) {
      if (row.opId !== opId || !row.hash.equals(hash)) continue;
      const own = row.stationId === stationId;
      // A copy that was dropped elsewhere decides nothing about what this station still holds.
      if (row.resolvedBy !== null && (own || row.resolverType !== 'entry-dropped'))
        throw new RejectedError(SETTLED, 'This was corrected or dropped already.');
      if (row.resolvedBy === null && own) throw new RejectedError(row.problem.code, row.problem.detail);
    }
  }

  /** Of an entry and its corrections one is accepted; only who may record an entry may drop it. @throws RejectedError */
  requireMaySettle(operation: Operation, role: Role): void {
    const opId = settledBy(operation);
    if (opId === undefined) return;
    const rows = this.rows.filter((row) => row.opId === opId);
    if (operation.type === 'entry-dropped') {
      const types = rows.flatMap(({ type }) => type ?? []);
      if (types.some((type) => isType(type) && !mayRecord(role, type)))
        throw new RejectedError('wrong-role', `A ${role} may not drop this. Ask a manager.`);
      return;
    }
    if (this.accepted.has(opId))
      throw new RejectedError('original-accepted', 'The first entry was accepted meanwhile. Drop this one.');
    const corrections = rows.filter(({ resolverType }) => resolverType !== null && resolverType !== 'entry-dropped');
    if (corrections.length > 0 || this.corrected.has(opId))
      throw new RejectedError('corrected-already', 'The first entry was corrected and sent already. Drop this one.');
  }

  /** Later entries of this push meet it. */
  accept(operation: Operation): void {
    this.accepted.add(operation.opId);
    const opId = settledBy(operation);
    if (opId !== undefined && operation.type !== 'entry-dropped') this.corrected.add(opId);
  }
}

const isType = (type: string): type is OperationType => Object.hasOwn(operationBodies, type);
