import type { Addition } from '#contract/operation-bodies.ts';
import type { Grade, Parent } from '#domain/compatibility.ts';
import type { Composition } from '#domain/composition.ts';
import { type PartsPerBillion, WHOLE } from '#domain/mass.ts';
import { type BucketRow, requireBucket } from '#server/repositories/buckets.ts';
import type { ApplyContext } from './apply-context.ts';

/** One addition with what it brings into the mix; an empty composition is unknown. */
export interface Source extends Parent {
  addition: Addition;
  composition: Composition;
  bucket?: BucketRow;
}

/** Reads what each addition was, before anything of this operation changes it. @throws RejectedError */
export async function readSources(context: ApplyContext, additions: readonly Addition[]): Promise<Source[]> {
  const sources: Source[] = [];
  for (const addition of additions) {
    sources.push(
      addition.kind === 'component' ? await readComponent(context, addition) : await readBucket(context, addition),
    );
  }
  return sources;
}

async function readComponent(
  { trx, shopId }: ApplyContext,
  addition: Addition & { kind: 'component' },
): Promise<Source> {
  const component = await trx
    .selectFrom('components')
    .select(['cureC', 'restrictions', 'hazards'])
    .where('shopId', '=', shopId)
    .where('id', '=', addition.componentId)
    .executeTakeFirstOrThrow();
  const lot =
    addition.lotId === null
      ? undefined
      : await trx
          .selectFrom('lots')
          .select('useBy')
          .where('shopId', '=', shopId)
          .where('id', '=', addition.lotId)
          .executeTakeFirst();
  const composition = new Map([[addition.componentId, WHOLE]]);
  return { addition, composition, grade: 'untouched', generation: 0, useBy: lot?.useBy ?? null, ...component };
}

async function readBucket(context: ApplyContext, addition: Addition & { kind: 'bucket' }): Promise<Source> {
  const { trx, shopId } = context;
  const bucket = await requireBucket(context, addition.bucketId);
  const shares = await trx
    .selectFrom('bucketComposition')
    .select(['componentId', 'ppb'])
    .where('shopId', '=', shopId)
    .where('bucketId', '=', bucket.id)
    .execute();
  const composition = new Map(shares.map((share) => [share.componentId, share.ppb as PartsPerBillion]));
  const { useBy, cureC, restrictions, hazards, generation } = bucket;
  return {
    addition,
    bucket,
    composition,
    grade: bucket.grade as Grade,
    useBy,
    cureC,
    restrictions,
    hazards,
    generation,
  };
}
