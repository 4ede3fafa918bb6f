import type { Grade } from '#domain/compatibility.ts';
import type { Composition } from '#domain/composition.ts';
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
export async function insertBucket(context: ApplyContext, tub: NewBucket, n: number): Promise<void> {
  const { trx, shopId, seq, operation } = context;
  const { bucketId, massMg, composition, lab, restrictions, hazards, ...plain } = tub;
  const taken = await trx
    .selectFrom('buckets')
    .select('id')
    .where('shopId', '=', shopId)
    .where('code', '=', tub.code)
    .executeTakeFirst();
  if (taken !== undefined)
    throw new RejectedError('code-given', `The code ${tub.code} is on another tub. Print a new label.`);
  await trx
    .insertInto('buckets')
    .values({
      ...plain,
      shopId,
      id: bucketId,
      filledMg: massMg,
      balanceMg: massMg,
      state: 'shelf',
      needsRecount: false,
      seen: JSON.stringify({ [operation.installId]: operation.deviceSeq }),
      lab: lab === null ? null : JSON.stringify(lab),
      restrictions: [...restrictions],
      hazards: [...hazards],
      changeSeq: seq,
    })
    .execute();
  const shares = [...composition].map(([componentId, ppb]) => ({ shopId, bucketId, componentId, ppb: ppb as number }));
  if (shares.length > 0) await trx.insertInto('bucketComposition').values(shares).execute();
  await trx
    .insertInto('movements')
    .values({ shopId, opId: operation.opId, n, bucketId, kind: 'filled', deltaMg: massMg })
    .execute();
}
