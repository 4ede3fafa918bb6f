import type { Addition } from '#contract/operation-bodies.ts';
import type { Parent } from '#domain/compatibility.ts';
import type { Composition } from '#domain/composition.ts';
import { WHOLE } from '#domain/mass.ts';
import { gradeWhenTaken } from '#domain/tub-effects.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';
import { type TubRow, requireBucket } from './move-bucket.ts';

/** One addition with what it brings into the mix; an empty composition is unknown. */
export interface Source extends Parent {
  addition: Addition;
  composition: Composition;
  bucket?: TubRow;
}

/** Reads what each addition was, before anything of this operation changes it. @throws RejectedError */
export function readSources(context: ApplyContext, additions: readonly Addition[]): Source[] {
  return additions.map((addition) =>
    addition.kind === 'component' ? readComponent(context, addition) : readBucket(context, addition),
  );
}

function readComponent({ draft }: ApplyContext, addition: Addition & { kind: 'component' }): Source {
  const { componentId, lotId } = addition;
  const component = draft.facts.components.get(componentId);
  if (component === undefined) throw new RejectedError('no-such-component', 'There is no such component in this shop.');
  const useBy = lotId === null ? null : (draft.facts.lots.get(lotId) ?? null);
  const composition = new Map([[componentId, WHOLE]]);
  return { addition, composition, grade: 'untouched', generation: 0, useBy, ...component };
}

function readBucket(context: ApplyContext, addition: Addition & { kind: 'bucket' }): Source {
  const bucket = requireBucket(context, addition.bucketId);
  const { grade, generation } = gradeWhenTaken(bucket, addition);
  const { useBy, cureC, restrictions, hazards } = bucket;
  const composition = context.draft.compositionOf(bucket.id);
  return {
    addition,
    bucket,
    composition,
    grade,
    useBy,
    cureC,
    restrictions,
    hazards,
    generation,
  };
}
