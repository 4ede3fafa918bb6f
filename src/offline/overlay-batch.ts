import type { Addition, Filled } from '#contract/operation-bodies.ts';
import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { type Parent, inherit, keptOnTub } from '#domain/compatibility.ts';
import { type Composition, blend } from '#domain/composition.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from '#domain/mass.ts';
import { gradeWhenTaken, takenFromTub } from '#domain/tub-effects.ts';
import { noTrace } from '#domain/tub-trace.ts';
import { correctedTime, foldTub } from './overlay-bucket.ts';
import type { Changes, OverlayFacts, Shown } from './overlay.ts';

type BatchMixed = Extract<Operation, { type: 'batch-mixed' }>;

/** A mixed batch: its row, the leftovers it took from, and the labelled tubs it was filled into. */
export function foldBatchMixed(shown: Shown, operation: BatchMixed, facts: OverlayFacts): Changes {
  const { body } = operation;
  const taken = new Map<string, Row<'buckets'>>();
  for (const addition of body.additions)
    if (addition.kind === 'bucket') takeFrom(taken, shown.buckets, operation, addition);
  const filled = body.filled.map((tub) => newTub(shown, operation, tub, facts));
  const sum = (additions: readonly Addition[]) => additions.reduce((total, addition) => total + addition.actualMg, 0);
  const batch: Row<'batches'> = {
    id: body.batchId,
    formulaId: body.formulaId,
    revision: body.revision,
    plannedMg: body.plannedMg,
    actualMg: sum(body.additions),
    reusedMg: sum(body.additions.filter((addition) => addition.kind === 'bucket')),
    state: body.release === null ? 'mixed' : 'released',
    light: body.release?.light ?? null,
    releasedBy: body.release === null ? null : operation.actorId,
    mixedBy: operation.actorId,
    mixedAt: correctedTime(operation),
    jobId: body.jobId,
    rush: body.rush,
  };
  return { buckets: [...taken.values(), ...filled], batches: [batch] };
}

/** A batch may take from one tub twice: what it took `before` is no longer shown. */
function takeFrom(
  taken: Map<string, Row<'buckets'>>,
  before: ReadonlyMap<string, Row<'buckets'>>,
  operation: BatchMixed,
  addition: Addition & { kind: 'bucket' },
): void {
  const { bucketId, displayed } = addition;
  const first = before.get(bucketId);
  if (first === undefined) return;
  const bucket = taken.get(bucketId) ?? first;
  const shownMg =
    displayed === undefined ? bucket.balanceMg : displayed.balanceMg - (first.balanceMg - bucket.balanceMg);
  taken.set(bucketId, foldTub(bucket, operation, takenFromTub(addition, shownMg)));
}

function newTub(shown: Shown, operation: BatchMixed, tub: Filled, facts: OverlayFacts): Row<'buckets'> {
  const { body } = operation;
  const formula = facts.formulas.get(body.formulaId);
  const revision = formula?.revisions.find((entry) => entry.revision === body.revision);
  const inherited = keptOnTub(inherit(body.additions.map((addition) => parentOf(addition, shown, facts))));
  return {
    id: tub.bucketId,
    code: tub.code,
    name: formula?.name ?? 'Mixed',
    formulaId: body.formulaId,
    revision: body.revision,
    batchId: body.batchId,
    familyId: revision?.familyId ?? '',
    containerId: tub.containerId,
    tareMg: tub.tareMg,
    filledMg: tub.massMg,
    filledAt: correctedTime(operation),
    filledBy: operation.actorId,
    locationId: tub.locationId,
    state: 'shelf',
    released: body.release !== null,
    balanceMg: tub.massMg,
    needsRecount: false,
    seen: { [operation.installId]: operation.deviceSeq },
    trace: noTrace(),
    composition: sharesOf(mixtureOf(body.additions, shown)),
    ...inherited,
    restrictions: [...inherited.restrictions],
    hazards: [...inherited.hazards],
    reservedFor: null,
    jobId: body.jobId,
    parents: parentsOf(body.additions),
    lab: revision?.lab ?? null,
    hiding: revision?.hiding ?? 0,
  };
}

/** Leftovers that are not on this device leave the composition unknown until the server tells it. */
function mixtureOf(additions: readonly Addition[], shown: Shown): Composition {
  const sources: { composition: Composition; mass: Milligrams }[] = [];
  for (const addition of additions) {
    const mass = addition.actualMg as Milligrams;
    if (addition.kind === 'component') sources.push({ composition: new Map([[addition.componentId, WHOLE]]), mass });
    else {
      const shares = shown.buckets.get(addition.bucketId)?.composition ?? [];
      if (shares.length === 0) return new Map();
      sources.push({
        composition: new Map(shares.map((share) => [share.componentId, share.ppb as PartsPerBillion])),
        mass,
      });
    }
  }
  return blend(sources);
}

/** Largest share first, as the server lists them. */
function sharesOf(composition: Composition): Row<'buckets'>['composition'] {
  const shares = [...composition].map(([componentId, ppb]) => ({ componentId, ppb }));
  return shares.sort((a, b) => b.ppb - a.ppb || (a.componentId < b.componentId ? -1 : 1));
}

/** One row a bucket, however often it was weighed from. */
function parentsOf(additions: readonly Addition[]): Row<'buckets'>['parents'] {
  const masses = new Map<string, number>();
  for (const addition of additions) {
    if (addition.kind !== 'bucket') continue;
    masses.set(addition.bucketId, (masses.get(addition.bucketId) ?? 0) + addition.actualMg);
  }
  return [...masses]
    .map(([bucketId, massMg]) => ({ bucketId, massMg }))
    .sort((a, b) => (a.bucketId < b.bucketId ? -1 : 1));
}

function parentOf(addition: Addition, shown: Shown, facts: OverlayFacts): Parent {
  if (addition.kind === 'component') {
    const component = facts.components.get(addition.componentId);
    const lot = addition.lotId === null ? undefined : facts.lots.get(addition.lotId);
    return {
      grade: 'untouched',
      useBy: lot?.useBy ?? null,
      cureC: component?.cureC ?? null,
      restrictions: component?.restrictions ?? [],
      hazards: component?.hazards ?? [],
      generation: 0,
    };
  }
  const bucket = shown.buckets.get(addition.bucketId);
  if (bucket !== undefined) return gradeWhenTaken(bucket, addition);
  return { grade: 'unknown', useBy: null, cureC: null, restrictions: [], hazards: [], generation: 0 };
}
