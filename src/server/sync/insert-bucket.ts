import type { Grade } from '#domain/compatibility.ts';
import type { Composition } from '#domain/composition.ts';
import { noTrace } from '#domain/tub-trace.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';

export interface NewBucket {
  bucketId: string;
  code: string;
  name: string;
  formulaId: string | null;
  revision: number | null;
  batchId: string | null;
  familyId: string;
  containerId: string;
  tareMg: number;
  massMg: number;
  filledAt: Date;
  filledBy: string | null;
  locationId: string | null;
  grade: Grade;
  released: boolean;
  useBy: string | null;
  cureC: number | null;
  restrictions: readonly string[];
  hazards: readonly string[];
  generation: number;
  jobId: string | null;
  lab: unknown;
  hiding: number;
  composition: Composition;
}

/** A new tub with its first movement, number `n` of the operation. @throws RejectedError when its code is given already */
export function insertBucket(context: ApplyContext, tub: NewBucket, n: number): void {
  const { draft, shopId, seq, operation } = context;
  const { bucketId, massMg, composition, restrictions, hazards, ...plain } = tub;
  if (draft.isCodeGiven(tub.code))
    throw new RejectedError('code-given', `The code ${tub.code} is on another tub. Print a new label.`);
  if (draft.findTub(bucketId) !== undefined)
    throw new RejectedError('tub-given', 'Another entry has filled this tub already.');
  draft.newTubs.add(bucketId);
  draft.compositions.set(bucketId, composition);
  draft.tubs.set(bucketId, {
    ...plain,
    shopId,
    id: bucketId,
    filledMg: massMg,
    balanceMg: massMg,
    state: 'shelf',
    needsRecount: false,
    reservedFor: null,
    deletedAt: null,
    seen: { [operation.installId]: operation.deviceSeq },
    trace: noTrace(),
    restrictions: [...restrictions],
    hazards: [...hazards],
    changeSeq: seq,
  });
  for (const [componentId, ppb] of composition)
    draft.writes.bucketComposition.push({ shopId, bucketId, componentId, ppb });
  draft.writes.movements.push({ shopId, opId: operation.opId, n, bucketId, kind: 'filled', deltaMg: massMg });
}
