import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { PushDeps, PushStation, Refused } from './apply-push.ts';

/** The server keeps what it refuses, whole; a refusal for the role is audited. */
export async function quarantine(
  trx: ShopTransaction,
  { shopId, stationId }: PushStation,
  refused: readonly Refused[],
  deps: PushDeps,
): Promise<void> {
  if (refused.length === 0) return;
  const now = deps.now();
  const rows = refused.map(({ entry, problem }) => ({
    shopId,
    opId: entry.opId,
    hash: entry.hash,
    stationId,
    raw: wholeText(entry.raw),
    problem: JSON.stringify(problem).replaceAll(UNSTORABLE, '\\ufffd'),
    receivedAt: now,
  }));
  await trx
    .insertInto('quarantine')
    .values(rows)
    .onConflict((conflict) => conflict.columns(['shopId', 'opId', 'hash']).doNothing())
    .execute();
  const audited = refused
    .filter(({ problem }) => problem.code === 'wrong-role')
    .map(({ entry }) => ({
      shopId,
      id: deps.randomId(),
      at: now,
      actorId: null,
      kind: 'operation-refused',
      detail: JSON.stringify({ opId: entry.opId, station: stationId }),
    }));
  if (audited.length > 0) await trx.insertInto('audit').values(audited).execute();
}

/** Escapes that jsonb does not take: NUL, and halves of surrogate pairs. */
const UNSTORABLE = /\\u0000|\\ud[89a-f][0-9a-f]{2}/gi;

/** JSON text for jsonb; of an entry that jsonb cannot hold, its text as one string, so that nothing of it is lost. */
function wholeText(raw: unknown): string {
  const text = JSON.stringify(raw);
  return text.search(UNSTORABLE) < 0 ? text : JSON.stringify(text);
}
