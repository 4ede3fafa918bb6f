import type { Row } from '#contract/rows.ts';
import { type FamilyRule, mayGoInto } from '#domain/compatibility.ts';
import type { Composition } from '#domain/composition.ts';
import type { FoldInProblem } from '#domain/fold-in.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';

export interface LeftOut {
  bucket: Row<'buckets'>;
  reason: string;
}

export interface ShelfFacts {
  target: Composition;
  familyId: string;
  batch: Milligrams;
  scale: Row<'scales'>;
  jobId: string | null;
  maxCureC: number | null;
  compliance: readonly string[];
  /** ISO date of today. */
  date: string;
  buckets: readonly Row<'buckets'>[];
  containers: ReadonlyMap<string, Row<'containers'>>;
  rules: readonly FamilyRule[];
  settings: Row<'shop'>['settings'];
  /** Refused with "Not this one" since the page was opened. */
  refused: ReadonlySet<string>;
  mustUse: string | null;
}

/** Which buckets of the shelf may go into the batch, and why each other one may not. */
export function chooseCandidates(facts: ShelfFacts): {
  candidates: FoldInProblem['buckets'];
  leftOut: readonly LeftOut[];
} {
  const candidates: FoldInProblem['buckets'][number][] = [];
  const leftOut: LeftOut[] = [];
  for (const bucket of facts.buckets) {
    if (bucket.state === 'empty' || bucket.state === 'discarded') continue;
    const reason = whyNot(bucket, facts);
    if (reason !== undefined) leftOut.push({ bucket, reason });
    else {
      candidates.push({
        id: bucket.id,
        usable: usableMass(bucket, facts.containers),
        composition: compositionOf(bucket),
        mustUse: bucket.id === facts.mustUse,
      });
    }
  }
  return { candidates, leftOut };
}

function whyNot(bucket: Row<'buckets'>, facts: ShelfFacts): string | undefined {
  if (facts.refused.has(bucket.id)) return 'Refused for this batch.';
  if (bucket.composition.length === 0 || bucket.grade === 'unknown') return 'What is in it is unknown.';
  if (usableMass(bucket, facts.containers) < facts.settings.minimumFromBucketMg) return 'Too little to take out.';
  const verdict = mayGoInto(
    { ...bucket },
    {
      familyId: facts.familyId,
      date: facts.date,
      maximumCureC: facts.maxCureC,
      jobId: facts.jobId,
      compliance: facts.compliance,
    },
    facts.rules,
  );
  return verdict.ok ? undefined : verdict.reason;
}

/** What can be scraped out: the books' balance less what stays on the wall of its container. */
export function usableMass(bucket: Row<'buckets'>, containers: ReadonlyMap<string, Row<'containers'>>): Milligrams {
  const wallLoss = containers.get(bucket.containerId)?.wallLossMg;
  if (wallLoss === undefined) return 0 as Milligrams;
  return Math.max(0, bucket.balanceMg - wallLoss) as Milligrams;
}

export function compositionOf(bucket: Row<'buckets'>): Composition {
  return new Map(bucket.composition.map((share) => [share.componentId, share.ppb as PartsPerBillion]));
}

/** The problem for the solver; an empty `tolerance` asks for the same recipe. */
export function foldInProblem(
  facts: ShelfFacts,
  candidates: FoldInProblem['buckets'],
  tolerance: ReadonlyMap<string, PartsPerBillion>,
  maximumBuckets: number,
): FoldInProblem {
  const step = facts.scale.readabilityMg;
  return {
    target: facts.target,
    batch: { minimum: facts.batch, maximum: facts.batch },
    buckets: candidates,
    tolerance,
    readability: step as Milligrams,
    minimumFromBucket: (Math.ceil(facts.settings.minimumFromBucketMg / step) * step) as Milligrams,
    minimumFresh: facts.scale.minimumMg as Milligrams,
    sliver: facts.settings.sliverMg as Milligrams,
    maximumBuckets,
    worthOpening: facts.settings.worthOpeningMg as Milligrams,
  };
}
