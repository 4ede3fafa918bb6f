import type { Operation } from '#contract/operation.ts';
import { bornWith } from './refused-tubs.ts';

/** Ids that a push names, by what they are: read at once before the effects of its operations are worked out. */
export interface PushReferences {
  operations: ReadonlySet<string>;
  installs: ReadonlySet<string>;
  grants: ReadonlySet<string>;
  people: ReadonlySet<string>;
  buckets: ReadonlySet<string>;
  /** Printed codes of new tubs. */
  codes: ReadonlySet<string>;
  batches: ReadonlySet<string>;
  formulas: ReadonlySet<string>;
  components: ReadonlySet<string>;
  lots: ReadonlySet<string>;
  scales: ReadonlySet<string>;
  containers: ReadonlySet<string>;
  locations: ReadonlySet<string>;
  families: ReadonlySet<string>;
  jobs: ReadonlySet<string>;
  /** Tubs and batches that begin with an entry of this push. */
  born: ReadonlySet<string>;
  /** Tubs that are issued without a reason, as released ink is. */
  issuedAsReleased: ReadonlySet<string>;
}

type Collected = { [K in keyof PushReferences]: Set<string> };

export function referencesOf(operations: readonly Operation[]): PushReferences {
  const found: Collected = {
    operations: new Set(),
    installs: new Set(),
    grants: new Set(),
    people: new Set(),
    buckets: new Set(),
    codes: new Set(),
    batches: new Set(),
    formulas: new Set(),
    components: new Set(),
    lots: new Set(),
    scales: new Set(),
    containers: new Set(),
    locations: new Set(),
    families: new Set(),
    jobs: new Set(),
    born: new Set(),
    issuedAsReleased: new Set(),
  };
  for (const operation of operations) {
    found.operations.add(operation.opId);
    found.installs.add(operation.installId);
    found.grants.add(operation.grantId);
    found.people.add(operation.actorId);
    for (const id of bornWith(operation)) found.born.add(id);
    addBody(found, operation);
  }
  return found;
}

function addBody(found: Collected, { type, body }: Operation): void {
  const add = (kind: keyof Collected, id: string | null) => id !== null && found[kind].add(id);
  if ('bucketId' in body) add('buckets', body.bucketId);
  if (type === 'bucket-issued' && body.overrideReason === null) add('issuedAsReleased', body.bucketId);
  if ('jobId' in body) add('jobs', body.jobId);
  if ('locationId' in body) add('locations', body.locationId);
  if ('batchId' in body) add('batches', body.batchId);
  if (type === 'bucket-adopted') {
    add('codes', body.code);
    add('families', body.familyId);
    add('containers', body.containerId);
    for (const share of body.composition) add('components', share.componentId);
  }
  if (type === 'formula-proposed') {
    add('formulas', body.formulaId);
    add('families', body.familyId);
    for (const part of body.parts) add('components', part.componentId);
  }
  if (type !== 'batch-mixed') return;
  add('formulas', body.formulaId);
  for (const addition of body.additions) {
    add('people', addition.actorId);
    add('scales', addition.scaleId);
    if (addition.kind === 'bucket') add('buckets', addition.bucketId);
    else {
      add('components', addition.componentId);
      add('lots', addition.lotId);
    }
  }
  for (const tub of body.filled) {
    add('buckets', tub.bucketId);
    add('codes', tub.code);
    add('containers', tub.containerId);
    add('locations', tub.locationId);
  }
}
