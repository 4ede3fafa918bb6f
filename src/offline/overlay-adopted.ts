import type { Operation } from '#contract/operation.ts';
import type { Row } from '#contract/rows.ts';
import { noTrace } from '#domain/tub-trace.ts';
import { correctedTime } from './overlay-bucket.ts';

/** A tub from before the books, as the shelf shows it until the server's row arrives. */
export function adoptedTub(operation: Extract<Operation, { type: 'bucket-adopted' }>): Row<'buckets'> {
  const { body } = operation;
  const mass = body.grossMg - body.tareMg;
  return {
    id: body.bucketId,
    code: body.code,
    name: body.name,
    formulaId: null,
    revision: null,
    batchId: null,
    familyId: body.familyId,
    containerId: body.containerId,
    tareMg: body.tareMg,
    filledMg: mass,
    filledAt: correctedTime(operation),
    filledBy: operation.actorId,
    locationId: body.locationId,
    state: 'shelf',
    grade: body.composition.length > 0 ? 'assumed' : 'unknown',
    released: true,
    balanceMg: mass,
    needsRecount: false,
    seen: { [operation.installId]: operation.deviceSeq },
    trace: noTrace(),
    composition: body.composition,
    useBy: null,
    cureC: null,
    restrictions: [],
    hazards: [],
    generation: 0,
    reservedFor: null,
    jobId: null,
    parents: [],
    lab: body.lab,
    hiding: 85,
  };
}
