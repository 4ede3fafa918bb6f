import { v7 as uuidv7 } from 'uuid';
import type { Operation } from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { OverlayFacts, Shown } from '#offline/overlay.ts';
import { START } from './station.ts';

export const installId = uuidv7();
let lastSeq = 0;

/** The next entry of one install whose clock is a minute slow. */
export function operationOf(body: OperationBody, seen: Operation['seen'] = {}): Operation {
  return {
    opId: uuidv7(),
    installId,
    deviceSeq: ++lastSeq,
    opVersion: 1,
    actorId: uuidv7(),
    grantId: uuidv7(),
    grantLapsed: false,
    deviceTime: START.toISOString(),
    clock: { offsetMs: 60_000, uncertaintyMs: 10, lastContact: null },
    seen,
    ...body,
  };
}

const byId = <T extends { id: string }>(rows: readonly T[]) => new Map(rows.map((row) => [row.id, row]));
export const shownOf = (...tubs: Row<'buckets'>[]): Shown => ({ buckets: byId(tubs), batches: new Map() });

export function facts(
  given: { formulas?: Row<'formulas'>[]; components?: Row<'components'>[]; lots?: Row<'lots'>[] } = {},
) {
  return {
    formulas: byId(given.formulas ?? []),
    components: byId(given.components ?? []),
    lots: byId(given.lots ?? []),
  } satisfies OverlayFacts;
}
