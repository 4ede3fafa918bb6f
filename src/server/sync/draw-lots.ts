import type { Addition } from '#contract/operation-bodies.ts';
import type { ApplyContext } from './apply-context.ts';

/** Books each component's addition against its lot. */
export async function drawLots(
  { trx, shopId, operation, seq }: ApplyContext,
  additions: readonly Addition[],
): Promise<void> {
  let n = 0;
  for (const addition of additions) {
    if (addition.kind !== 'component' || addition.lotId === null) continue;
    const deltaMg = -addition.actualMg;
    await trx
      .insertInto('lotMovements')
      .values({ shopId, opId: operation.opId, n: ++n, lotId: addition.lotId, deltaMg })
      .execute();
    await trx
      .updateTable('lots')
      .set((eb) => ({ balanceMg: eb('balanceMg', '+', deltaMg), changeSeq: seq }))
      .where('shopId', '=', shopId)
      .where('id', '=', addition.lotId)
      .execute();
  }
}
