import { v7 as uuidv7 } from 'uuid';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Milligrams } from '#domain/mass.ts';
import { START } from './station.ts';

export type BodyOf<T extends OperationBody['type']> = Extract<OperationBody, { type: T }>;
type Addition = BodyOf<'batch-mixed'>['body']['additions'][number];

const at = START.toISOString();
const mg = (value: number) => value as Milligrams;

export function fresh(componentId: string, actualMg: number): Addition {
  const actorId = uuidv7();
  const actual = mg(actualMg);
  return {
    kind: 'component',
    componentId,
    lotId: null,
    scaleId: null,
    plannedMg: actual,
    actualMg: actual,
    at,
    actorId,
  };
}

export function fromTub(bucketId: string, actualMg: number, empties = false): Addition {
  const actual = mg(actualMg);
  return {
    kind: 'bucket',
    bucketId,
    scaleId: null,
    plannedMg: actual,
    actualMg: actual,
    empties,
    at,
    actorId: uuidv7(),
  };
}

/** A batch of its additions, filled whole into one tub. */
export function batchMixed(
  additions: Addition[],
  given: Partial<BodyOf<'batch-mixed'>['body']> = {},
): BodyOf<'batch-mixed'> {
  const massMg = mg(additions.reduce((sum, addition) => sum + addition.actualMg, 0));
  const tub = {
    bucketId: uuidv7(),
    code: 'AC23467A',
    containerId: uuidv7(),
    tareMg: mg(68_000),
    massMg,
    locationId: null,
  };
  return {
    type: 'batch-mixed',
    body: {
      batchId: uuidv7(),
      formulaId: uuidv7(),
      revision: 1,
      plannedMg: massMg,
      jobId: null,
      rush: false,
      additions,
      release: null,
      filled: [tub],
      ...given,
    },
  };
}

export function returned(
  bucketId: string,
  given: Partial<BodyOf<'bucket-returned'>['body']> = {},
): BodyOf<'bucket-returned'> {
  return {
    type: 'bucket-returned',
    body: {
      bucketId,
      jobId: null,
      grossMg: mg(368_000),
      tareMg: mg(68_000),
      displayedMg: 500_000,
      deltaMg: -200_000,
      condition: 'clean',
      locationId: null,
      ...given,
    },
  };
}

export function relocated(bucketId: string, locationId: string = uuidv7()): BodyOf<'bucket-relocated'> {
  return { type: 'bucket-relocated', body: { bucketId, locationId } };
}
