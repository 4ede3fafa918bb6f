import type { OperationBody } from '#contract/operation-bodies.ts';
import { CompositionError, requireWhole } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';
import { type ApplyContext, RejectedError } from './apply-context.ts';
import { insertBucket } from './insert-bucket.ts';
import { requireOwn } from './require-own.ts';

type Adopted = Extract<OperationBody, { type: 'bucket-adopted' }>['body'];

/** A tub from before the books: weighed; what is in it is assumed, or unknown when no composition is given. */
export function adoptBucket(context: ApplyContext, body: Adopted): void {
  requireOwn(context, 'families', body.familyId);
  requireOwn(context, 'containers', body.containerId);
  requireOwn(context, 'locations', body.locationId);
  requireOwn(context, 'components', ...body.composition.map((share) => share.componentId));
  const composition = new Map(body.composition.map((share) => [share.componentId, share.ppb as PartsPerBillion]));
  if (composition.size > 0) requireAddsUp(composition);
  if (body.grossMg <= body.tareMg) throw new RejectedError('below-tare', 'The gross weight is below the tare.');
  insertBucket(
    context,
    {
      bucketId: body.bucketId,
      code: body.code,
      name: body.name,
      formulaId: null,
      revision: null,
      batchId: null,
      familyId: body.familyId,
      containerId: body.containerId,
      tareMg: body.tareMg,
      massMg: body.grossMg - body.tareMg,
      filledAt: context.at,
      filledBy: context.operation.actorId,
      locationId: body.locationId,
      grade: composition.size > 0 ? 'assumed' : 'unknown',
      released: true,
      useBy: null,
      cureC: null,
      restrictions: [],
      hazards: [],
      generation: 0,
      jobId: null,
      lab: body.lab,
      hiding: 85,
      composition,
    },
    1,
  );
}

function requireAddsUp(composition: ReadonlyMap<string, PartsPerBillion>): void {
  try {
    requireWhole(composition);
  } catch (error) {
    if (error instanceof CompositionError) throw new RejectedError('sum', error.message);
    throw error;
  }
}
