/** May ink of one family go into a batch of another? No row means no: compatibility is default deny. */
export interface FamilyRule {
  intoId: string;
  fromId: string;
  verdict: 'yes' | 'no' | 'never';
  reason: string;
}

export type Grade = 'untouched' | 'returned' | 'assumed' | 'unknown';

/** What the rules read of a bucket; dates are ISO dates, cure in °C. */
export interface BucketFacts {
  familyId: string;
  grade: Grade;
  state: 'shelf' | 'at-press' | 'quarantine' | 'empty' | 'discarded';
  /** For whom it is kept, in words. */
  reservedFor: string | null;
  jobId: string | null;
  useBy: string | null;
  cureC: number | null;
  /** Restrictions that the ink does not keep, such as "contains phthalates". */
  restrictions: readonly string[];
  generation: number;
  needsRecount: boolean;
  released: boolean;
}

/** What the rules read of the batch; `compliance`: restrictions that must not come in. */
export interface BatchFacts {
  familyId: string;
  date: string;
  maximumCureC: number | null;
  jobId: string | null;
  compliance: readonly string[];
}

/** Returned ink may come back twice. Common practice, no source. */
const MOST_GENERATIONS = 2;

/** The first rule that keeps a bucket out of a batch, in one line. */
export function mayGoInto(
  bucket: BucketFacts,
  batch: BatchFacts,
  rules: readonly FamilyRule[],
): { ok: true } | { ok: false; reason: string } {
  const reason = whyNotItself(bucket, batch) ?? whyNotItsKind(bucket, batch, rules);
  return reason === undefined ? { ok: true } : { ok: false, reason };
}

function whyNotItself(bucket: BucketFacts, batch: BatchFacts): string | undefined {
  if (bucket.state === 'quarantine') return 'In quarantine.';
  if (bucket.state === 'at-press') return 'At a press.';
  if (bucket.state !== 'shelf') return 'Empty or discarded.';
  if (bucket.grade === 'unknown') return 'What is in it is unknown.';
  if (bucket.needsRecount) return 'Two records disagree. Weigh it again first.';
  if (!bucket.released) return 'Not released.';
  if (bucket.reservedFor !== null && (batch.jobId === null || bucket.jobId !== batch.jobId))
    return `Kept for ${bucket.reservedFor}.`;
  if (bucket.useBy !== null && bucket.useBy < batch.date) return `Past its use-by, ${bucket.useBy}.`;
  if (bucket.generation >= MOST_GENERATIONS) return 'Came back from the press twice already.';
  return undefined;
}

function whyNotItsKind(bucket: BucketFacts, batch: BatchFacts, rules: readonly FamilyRule[]): string | undefined {
  const rule = rules.find((entry) => entry.intoId === batch.familyId && entry.fromId === bucket.familyId);
  if (rule === undefined) return 'No rule allows this family.';
  if (rule.verdict !== 'yes') return rule.reason;
  const foreign = bucket.restrictions.find((restriction) => batch.compliance.includes(restriction));
  if (foreign !== undefined) return `The job rules out: ${foreign}.`;
  if (batch.maximumCureC !== null && bucket.cureC !== null && bucket.cureC > batch.maximumCureC) {
    return `Cures at ${bucket.cureC} °C, the garment takes ${batch.maximumCureC} °C.`;
  }
  return undefined;
}

/** What goes into a mix, component or bucket. */
export interface Parent {
  grade: Grade;
  useBy: string | null;
  cureC: number | null;
  restrictions: readonly string[];
  hazards: readonly string[];
  generation: number;
  /** Ids of the lots in it, as far as they are known. */
  lots?: readonly string[];
}

export type Inherited = Required<Parent>;

const WORST_FIRST: readonly Grade[] = ['unknown', 'assumed', 'returned', 'untouched'];

/** A mix takes the worst grade, every restriction, hazard and lot, the earliest use-by, the highest cure and generation. */
export function inherit(parents: readonly Parent[]): Inherited {
  const dates = parents.flatMap((parent) => parent.useBy ?? []).sort();
  const cures = parents.flatMap((parent) => parent.cureC ?? []);
  return {
    grade: WORST_FIRST.find((grade) => parents.some((parent) => parent.grade === grade)) ?? 'untouched',
    useBy: dates[0] ?? null,
    cureC: cures.length === 0 ? null : Math.max(...cures),
    restrictions: [...new Set(parents.flatMap((parent) => parent.restrictions))].sort(),
    hazards: [...new Set(parents.flatMap((parent) => parent.hazards))].sort(),
    generation: Math.max(0, ...parents.map((parent) => parent.generation)),
    lots: [...new Set(parents.flatMap((parent) => parent.lots ?? []))].sort(),
  };
}

/** What a tub keeps of it; its lots are told by its additions and parents. */
export function keptOnTub({ grade, useBy, cureC, restrictions, hazards, generation }: Inherited) {
  return { grade, useBy, cureC, restrictions, hazards, generation };
}
