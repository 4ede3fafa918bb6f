import type { Addition } from '#contract/operation-bodies.ts';
import type { ApplyContext } from './apply-context.ts';

/** Books each component's addition against its lot. */
export function drawLots({ draft, shopId, operation }: ApplyContext, additions: readonly Addition[]): void {
  let n = 0;
  for (const addition of additions) {
    if (addition.kind !== 'component' || addition.lotId === null) continue;
    const { lotId, actualMg } = addition;
    draft.writes.lotMovements.push({ shopId, opId: operation.opId, n: ++n, lotId, deltaMg: -actualMg });
  }
}
