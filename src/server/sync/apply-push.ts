import { createHash } from 'node:crypto';
import { sql } from 'kysely';
import { type Operation, operation as operationSchema, operationId } from '#contract/operation.ts';
import { makeProblem } from '#contract/problem.ts';
import { PROTOCOL, type PushOutcome, type PushRequest, type PushResponse } from '#contract/push.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { log } from '#server/http/log.ts';
import { applyOperation } from './apply-operation.ts';
import { RejectedError } from './apply-context.ts';
import { requireAuthorised } from './authorise.ts';
import { canonicalJson } from './canonical-json.ts';
import { correctedTime } from './corrected-time.ts';

export interface PushDeps {
  now: () => Date;
  randomId: () => string;
}

interface Received {
  raw: unknown;
  opId: string;
  hash: Buffer;
  parsed: { operation: Operation } | { problem: string };
}

/**
 * Takes a push in one transaction under the shop's counter row: each operation once, a poor one into quarantine and the
 * others carried. An operation without a readable id is not listed in the answer.
 */
export function applyPush(
  db: Database,
  station: { shopId: string; stationId: string },
  push: PushRequest,
  deps: PushDeps,
): Promise<PushResponse> {
  const received = push.ops.flatMap((raw) => receive(raw) ?? []);
  return inShop(db, station.shopId, async (trx) => {
    const { seq } = await trx
      .updateTable('shopSync')
      .set((eb) => ({ seq: eb('seq', '+', 1) }))
      .where('shopId', '=', station.shopId)
      .returning('seq')
      .executeTakeFirstOrThrow();
    const results: PushOutcome[] = [];
    for (const entry of received) results.push(await takeOne(trx, station, entry, seq, deps));
    return { protocol: PROTOCOL, requestId: push.requestId, serverTime: deps.now().toISOString(), results };
  });
}

function receive(raw: unknown): Received | undefined {
  const id = operationId.safeParse(raw);
  if (!id.success) return undefined;
  const hash = createHash('sha256').update(canonicalJson(raw)).digest();
  const parsed = operationSchema.safeParse(raw);
  if (parsed.success) return { raw, opId: id.data.opId, hash, parsed: { operation: parsed.data } };
  const issue = parsed.error.issues[0];
  return {
    raw,
    opId: id.data.opId,
    hash,
    parsed: { problem: `${issue?.path.join('.') || 'The entry'}: ${issue?.message ?? 'does not fit'}` },
  };
}

/** A savepoint for each operation: what it half wrote is undone, what came before stays. */
async function takeOne(
  trx: ShopTransaction,
  station: { shopId: string; stationId: string },
  entry: Received,
  seq: number,
  deps: PushDeps,
): Promise<PushOutcome> {
  await sql`savepoint one_operation`.execute(trx);
  try {
    if ('problem' in entry.parsed) throw new RejectedError('unreadable', `Not readable. ${entry.parsed.problem}.`);
    const outcome = await store(trx, station, entry, entry.parsed.operation, seq, deps);
    await sql`release savepoint one_operation`.execute(trx);
    return outcome;
  } catch (error) {
    await sql`rollback to savepoint one_operation`.execute(trx);
    return quarantine(trx, station, entry, error, deps);
  }
}

async function store(
  trx: ShopTransaction,
  { shopId, stationId }: { shopId: string; stationId: string },
  entry: Received,
  operation: Operation,
  seq: number,
  deps: PushDeps,
): Promise<PushOutcome> {
  const { opId } = operation;
  const known = await trx
    .selectFrom('operations')
    .select(['hash', 'changeSeq'])
    .where('shopId', '=', shopId)
    .where('opId', '=', opId)
    .executeTakeFirst();
  if (known !== undefined) {
    if (!known.hash.equals(entry.hash))
      throw new RejectedError('op-id-reused', 'Another entry has this number already.');
    return { opId, outcome: 'duplicate', changeSeq: known.changeSeq };
  }
  await requireAuthorised(trx, shopId, stationId, operation);
  const receivedAt = deps.now();
  const at = correctedTime(operation, receivedAt);
  await trx
    .insertInto('operations')
    .values({
      shopId,
      opId,
      installId: operation.installId,
      deviceSeq: operation.deviceSeq,
      actorId: operation.actorId,
      grantId: operation.grantId,
      type: operation.type,
      opVersion: operation.opVersion,
      envelope: JSON.stringify(entry.raw),
      hash: entry.hash,
      correctedTime: at,
      receivedAt,
      changeSeq: seq,
      outcome: operation.grantLapsed ? 'accepted-lapsed' : 'accepted',
    })
    .execute();
  await trx
    .updateTable('installs')
    .set((eb) => ({ lastSeq: eb.fn<number>('greatest', ['lastSeq', eb.val(operation.deviceSeq)]) }))
    .where('shopId', '=', shopId)
    .where('id', '=', operation.installId)
    .execute();
  await applyOperation({ trx, shopId, seq, operation, at });
  return { opId, outcome: 'accepted', changeSeq: seq };
}

/** The server keeps what it refuses, whole; a refusal for the role is audited. */
async function quarantine(
  trx: ShopTransaction,
  { shopId, stationId }: { shopId: string; stationId: string },
  entry: Received,
  error: unknown,
  deps: PushDeps,
): Promise<PushOutcome> {
  const refused = error instanceof RejectedError;
  if (!refused) {
    if (isConnectionLoss(error)) throw error;
    log.error({ opId: entry.opId, error: error instanceof Error ? error.message : String(error) }, 'operation failed');
  }
  const code = refused ? error.code : 'not-storable';
  const detail = refused ? error.message : 'The server could not store this entry. Show it to a manager.';
  const problem = makeProblem(422, code, 'Not accepted', detail);
  await trx
    .insertInto('quarantine')
    .values({
      shopId,
      opId: entry.opId,
      hash: entry.hash,
      stationId,
      raw: JSON.stringify(entry.raw),
      problem: JSON.stringify(problem),
      receivedAt: deps.now(),
    })
    .onConflict((conflict) => conflict.columns(['shopId', 'opId', 'hash']).doNothing())
    .execute();
  if (code === 'wrong-role') {
    const detailOf = JSON.stringify({ opId: entry.opId, station: stationId });
    await trx
      .insertInto('audit')
      .values({
        shopId,
        id: deps.randomId(),
        at: deps.now(),
        actorId: null,
        kind: 'operation-refused',
        detail: detailOf,
      })
      .execute();
  }
  return { opId: entry.opId, outcome: 'rejected', problem };
}

/** Without a connection nothing was decided: the station sends the whole push again. */
function isConnectionLoss(error: unknown): boolean {
  const code = (error as { code?: unknown }).code;
  return typeof code === 'string' ? /^(08|57P|ECONN|EPIPE)/.test(code) : /Connection terminated/.test(String(error));
}
