import { createHash } from 'node:crypto';
import { type Operation, operation as operationSchema, operationId } from '#contract/operation.ts';
import { type Problem, makeProblem } from '#contract/problem.ts';
import { PROTOCOL, type PushOutcome, type PushRequest, type PushResponse } from '#contract/push.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';
import { isPassing } from '#server/db/passing-error.ts';
import { log } from '#server/http/log.ts';
import { NotYetError, RejectedError } from './apply-context.ts';
import { applyOperation } from './apply-operation.ts';
import { requireAuthorised } from './authorise.ts';
import { canonicalJson } from './canonical-json.ts';
import { correctedTime } from './corrected-time.ts';
import { PushBook, PushDraft } from './push-book.ts';
import { readFacts } from './push-facts.ts';
import { referencesOf } from './push-references.ts';
import { quarantine } from './quarantine.ts';
import { RefusedEntries } from './refused-entries.ts';
import { bornWith } from './refused-tubs.ts';
import { resolveRefusals } from './resolve-refusals.ts';
import { writePush } from './write-push.ts';

export interface PushDeps {
  now: () => Date;
  randomId: () => string;
}

export interface PushStation {
  shopId: string;
  stationId: string;
  /** Nothing of it is applied any more; all of it is kept in quarantine. */
  revoked?: boolean;
}

/** An operation as it came, readable or not. */
export interface Received {
  raw: unknown;
  opId: string;
  hash: Buffer;
  parsed: { operation: Operation } | { problem: string };
}

export interface Refused {
  entry: Received;
  problem: Problem;
}

/**
 * Takes a push in one transaction under the shop's counter row: each operation once, a poor one into quarantine and the
 * others carried. An operation without a readable id is not listed in the answer.
 */
export async function applyPush(
  db: Database,
  station: PushStation,
  push: PushRequest,
  deps: PushDeps,
): Promise<PushResponse> {
  const received = push.ops.flatMap((raw) => receive(raw) ?? []);
  const results = await takeAll(db, station, received, deps);
  return { protocol: PROTOCOL, requestId: push.requestId, serverTime: deps.now().toISOString(), results };
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

/** On an unforeseen error nothing of it is written; each half is tried by itself, until the one that fails is alone. */
async function takeAll(
  db: Database,
  station: PushStation,
  received: readonly Received[],
  deps: PushDeps,
): Promise<PushOutcome[]> {
  try {
    return await inShop(db, station.shopId, (trx) => takeTogether(trx, station, received, deps));
  } catch (error) {
    if (isPassing(error)) throw error;
    const [first] = received;
    if (received.length > 1) {
      const half = received.length >> 1;
      const before = await takeAll(db, station, received.slice(0, half), deps);
      return [...before, ...(await takeAll(db, station, received.slice(half), deps))];
    }
    if (first === undefined) throw error;
    const refused = { entry: first, problem: problemOf(error, first) };
    await inShop(db, station.shopId, async (trx) => {
      await nextSeq(trx, station.shopId);
      await quarantine(trx, station, [refused], deps);
      await resolveRefusals(trx, station, [], [refused], deps);
    });
    return [{ opId: first.opId, outcome: 'rejected', problem: refused.problem }];
  }
}

async function takeTogether(
  trx: ShopTransaction,
  station: PushStation,
  received: readonly Received[],
  deps: PushDeps,
): Promise<PushOutcome[]> {
  const seq = await nextSeq(trx, station.shopId);
  const operations = received.flatMap(({ parsed }) => ('operation' in parsed ? parsed.operation : []));
  const book = new PushBook(await readFacts(trx, station, referencesOf(operations)));
  const earlier = await RefusedEntries.read(trx, station.shopId, received);
  const accepted: Operation[] = [];
  const refused: Refused[] = [];
  const results = received.map((entry): PushOutcome => {
    try {
      const outcome = takeOne(book, earlier, station, entry, seq, deps);
      if (outcome.outcome === 'accepted' && 'operation' in entry.parsed) accepted.push(entry.parsed.operation);
      return outcome;
    } catch (error) {
      if (error instanceof NotYetError) return { opId: entry.opId, outcome: 'retry' };
      const problem = problemOf(error, entry);
      if ('operation' in entry.parsed) for (const id of bornWith(entry.parsed.operation)) book.refused.add(id);
      refused.push({ entry, problem });
      return { opId: entry.opId, outcome: 'rejected', problem };
    }
  });
  await writePush(trx, station.shopId, seq, book);
  await quarantine(trx, station, refused, deps);
  await resolveRefusals(trx, station, accepted, refused, deps);
  return results;
}

/** The shop's lock, and the place of what is written under it in the order of changes. */
async function nextSeq(trx: ShopTransaction, shopId: string): Promise<number> {
  const { seq } = await trx
    .updateTable('shopSync')
    .set((eb) => ({ seq: eb('seq', '+', 1) }))
    .where('shopId', '=', shopId)
    .returning('seq')
    .executeTakeFirstOrThrow();
  return seq;
}

function takeOne(
  book: PushBook,
  earlier: RefusedEntries,
  station: PushStation,
  entry: Received,
  seq: number,
  deps: PushDeps,
): PushOutcome {
  const { shopId, revoked } = station;
  earlier.requireNew(entry, station);
  if ('problem' in entry.parsed) throw new RejectedError('unreadable', `Not readable. ${entry.parsed.problem}.`);
  const { operation } = entry.parsed;
  const { opId } = operation;
  const known = book.facts.operations.get(opId) ?? book.writes.operations.find((written) => written.opId === opId);
  if (known !== undefined) {
    if (!known.hash.equals(entry.hash))
      throw new RejectedError('op-id-reused', 'Another entry has this number already.');
    return { opId, outcome: 'duplicate', changeSeq: known.changeSeq, ...proposedBy(book, opId) };
  }
  if (revoked === true)
    throw new RejectedError('station-revoked', 'This device was revoked. A manager looks at what it recorded.');
  earlier.requireMaySettle(operation, requireAuthorised(book.facts, operation));
  const receivedAt = deps.now();
  const at = correctedTime(operation, receivedAt);
  const draft = new PushDraft(book);
  draft.writes.operations.push({
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
  });
  applyOperation({ shopId, seq, operation, at, draft });
  book.accept(draft);
  earlier.accept(operation);
  return { opId, outcome: 'accepted', changeSeq: seq, ...proposedBy(book, opId) };
}

/** The number that a proposed formula was given, now or when it came first. */
function proposedBy({ facts, writes }: PushBook, opId: string): { revision?: number } {
  const written = writes.formulaRevisions.find((row) => row.opId === opId);
  const revision = written?.revision ?? facts.operations.get(opId)?.revision;
  return typeof revision === 'number' ? { revision } : {};
}

function problemOf(error: unknown, entry: Received): Problem {
  if (error instanceof RejectedError) return makeProblem(422, error.code, 'Not accepted', error.message);
  log.error({ opId: entry.opId, error: error instanceof Error ? error.message : String(error) }, 'operation failed');
  const detail = 'The server could not store this entry. Show it to a manager.';
  return makeProblem(422, 'not-storable', 'Not accepted', detail);
}
