import type { OperationBody } from '#contract/operation-bodies.ts';
import { CompositionError, compositionFromParts } from '#domain/composition.ts';
import { type ApplyContext, NotYetError, RejectedError } from './apply-context.ts';
import { revisionKey } from './push-facts.ts';
import { requireOwn } from './require-own.ts';

type Proposed = Extract<OperationBody, { type: 'formula-proposed' }>['body'];

/**
 * A draft of its own, whatever others proposed on the same base: both are kept, and nobody's components are merged.
 * Colour and hiding stay those of the base until it is approved.
 */
export function applyFormulaProposed(context: ApplyContext, body: Proposed): void {
  const { draft, shopId, operation } = context;
  requireOwn(context, 'families', body.familyId);
  requireOwn(context, 'components', ...body.parts.map((part) => part.componentId));
  requireMixable(body);
  const { formulaId, baseRevision } = body;
  const newest = draft.newestRevision(formulaId);
  if (newest === 0) throw new RejectedError('no-such-formula', 'There is no such formula in this shop.');
  // The base is itself a draft that this station saw and that is still to come.
  if (baseRevision > newest) throw new NotYetError();
  const base = draft.findRevision(revisionKey(formulaId, baseRevision));
  if (base === undefined) throw new RejectedError('no-such-formula', 'There is no such formula revision in this shop.');
  const revision = newest + 1;
  draft.writes.formulaRevisions.push({
    shopId,
    formulaId,
    revision,
    state: 'draft',
    familyId: body.familyId,
    lab: base.lab === null ? null : JSON.stringify(base.lab),
    hiding: base.hiding,
    baseRevision,
    opId: operation.opId,
    proposedBy: operation.actorId,
    name: body.name ?? null,
    note: body.note,
  });
  const parts = body.parts.map((part, n) => ({ shopId, formulaId, revision, position: n + 1, ...part }));
  draft.writes.formulaParts.push(...parts);
}

function requireMixable({ parts }: Proposed): void {
  try {
    compositionFromParts(parts);
  } catch (error) {
    if (error instanceof CompositionError) throw new RejectedError('sum', error.message);
    throw error;
  }
}
