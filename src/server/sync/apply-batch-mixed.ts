import type { Addition, Filled, OperationBody } from '#contract/operation-bodies.ts';
import { inherit, keptOnTub } from '#domain/compatibility.ts';
import { type Composition, blend } from '#domain/composition.ts';
import type { Milligrams } from '#domain/mass.ts';
import { takenFromTub } from '#domain/tub-effects.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';
import { drawLots } from './draw-lots.ts';
import { insertBucket } from './insert-bucket.ts';
import { moveBucket, requireBucket } from './move-bucket.ts';
import { type Revision, revisionKey } from './push-facts.ts';
import { type Source, readSources } from './read-sources.ts';
import { requireOwn } from './require-own.ts';

type BatchMixed = Extract<OperationBody, { type: 'batch-mixed' }>['body'];
type FromBucket = Addition & { kind: 'bucket' };

/** A mixed batch: its additions, what it took from lots and buckets, and the labelled tubs that hold it now. */
export function applyBatchMixed(context: ApplyContext, body: BatchMixed): void {
  const total = sum(body.additions.map((addition) => addition.actualMg));
  if (total !== sum(body.filled.map((tub) => tub.massMg))) {
    throw new RejectedError('sum', 'What was filled is not what was weighed in.');
  }
  requireParts(context, body);
  const revision = requireRevision(context, body);
  const sources = readSources(context, body.additions);
  insertBatch(context, body, total);
  insertAdditions(context, body);
  drawLots(context, body.additions);
  let n = 1;
  for (const addition of body.additions) if (addition.kind === 'bucket') n = takeFrom(context, addition, n);
  const mixture = mixtureOf(sources);
  const inherited = keptOnTub(inherit(sources));
  for (const tub of body.filled) {
    insertBucket(context, { ...tubOf(context, body, tub), ...inherited, ...revision, composition: mixture }, n++);
    insertParents(context, tub, sources);
  }
}

function requireParts(context: ApplyContext, body: BatchMixed): void {
  const { additions } = body;
  requireOwn(context, 'jobs', body.jobId);
  requireOwn(context, 'scales', ...additions.map((addition) => addition.scaleId));
  requireOwn(context, 'people', ...additions.map((addition) => addition.actorId));
  requireOwn(
    context,
    'components',
    ...additions.map((addition) => (addition.kind === 'component' ? addition.componentId : null)),
  );
  requireOwn(context, 'lots', ...additions.map((addition) => (addition.kind === 'component' ? addition.lotId : null)));
  requireOwn(context, 'containers', ...body.filled.map((tub) => tub.containerId));
  requireOwn(context, 'locations', ...body.filled.map((tub) => tub.locationId));
}

function requireRevision({ draft }: ApplyContext, body: BatchMixed): Revision {
  const revision = draft.facts.revisions.get(revisionKey(body.formulaId, body.revision));
  if (revision === undefined)
    throw new RejectedError('no-such-formula', 'There is no such formula revision in this shop.');
  return revision;
}

function insertBatch({ draft, shopId, seq, operation, at }: ApplyContext, body: BatchMixed, total: number): void {
  draft.writes.batches.push({
    shopId,
    id: body.batchId,
    opId: operation.opId,
    formulaId: body.formulaId,
    revision: body.revision,
    plannedMg: body.plannedMg,
    actualMg: total,
    reusedMg: sum(body.additions.map((addition) => (addition.kind === 'bucket' ? addition.actualMg : 0))),
    state: body.release === null ? 'mixed' : 'released',
    light: body.release?.light ?? null,
    releasedBy: body.release === null ? null : operation.actorId,
    mixedBy: operation.actorId,
    mixedAt: at,
    jobId: body.jobId,
    rush: body.rush,
    changeSeq: seq,
  });
}

function insertAdditions({ draft, shopId }: ApplyContext, body: BatchMixed): void {
  const rows = body.additions.map((addition, index) => ({
    shopId,
    batchId: body.batchId,
    n: index + 1,
    actorId: addition.actorId,
    scaleId: addition.scaleId,
    componentId: addition.kind === 'component' ? addition.componentId : null,
    lotId: addition.kind === 'component' ? addition.lotId : null,
    bucketId: addition.kind === 'bucket' ? addition.bucketId : null,
    plannedMg: addition.plannedMg,
    actualMg: addition.actualMg,
    addedAt: new Date(addition.at),
  }));
  draft.writes.additions.push(...rows);
}

/** A batch may take from one tub twice: what it took before is no longer shown. */
function takeFrom(context: ApplyContext, addition: FromBucket, n: number): number {
  const bucket = requireBucket(context, addition.bucketId);
  const { actualMg, displayed } = addition;
  const shownMg = displayed === undefined ? bucket.balanceMg : displayed.balanceMg - takenSoFar(context, bucket.id);
  const effect = takenFromTub(addition, shownMg);
  const restMg = -effect.deltaMg - actualMg;
  const movements = [{ kind: 'folded-in' as const, deltaMg: -actualMg }];
  if (restMg === 0) return moveBucket(context, bucket, effect, movements, n);
  return moveBucket(context, bucket, effect, [...movements, { kind: 'wall-loss', deltaMg: -restMg }], n);
}

function takenSoFar({ draft }: ApplyContext, bucketId: string): number {
  return -sum(draft.writes.movements.flatMap((movement) => (movement.bucketId === bucketId ? movement.deltaMg : [])));
}

/** Unknown as soon as one source is unknown. */
function mixtureOf(sources: readonly Source[]): Composition {
  if (sources.some((source) => source.composition.size === 0)) return new Map();
  return blend(
    sources.map((source) => ({ composition: source.composition, mass: source.addition.actualMg as Milligrams })),
  );
}

function tubOf({ operation, at }: ApplyContext, body: BatchMixed, tub: Filled) {
  return {
    ...tub,
    formulaId: body.formulaId,
    revision: body.revision,
    batchId: body.batchId,
    filledAt: at,
    filledBy: operation.actorId,
    released: body.release !== null,
    jobId: body.jobId,
  };
}

function insertParents({ draft, shopId }: ApplyContext, tub: Filled, sources: readonly Source[]): void {
  const masses = new Map<string, number>();
  for (const { bucket, addition } of sources) {
    if (bucket !== undefined) masses.set(bucket.id, (masses.get(bucket.id) ?? 0) + addition.actualMg);
  }
  if (masses.size === 0) return;
  const rows = [...masses].map(([parentId, massMg]) => ({ shopId, childId: tub.bucketId, parentId, massMg }));
  draft.writes.bucketParents.push(...rows);
}

function sum(masses: readonly number[]): number {
  return masses.reduce((total, mass) => total + mass, 0);
}
