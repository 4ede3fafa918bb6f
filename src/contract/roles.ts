import * as z from 'zod/mini';
import type { OperationType } from './operation-bodies.ts';

export const role = z.enum(['mixer', 'operator', 'planner', 'manager', 'owner']);
export type Role = z.infer<typeof role>;

const ink: readonly Role[] = ['mixer', 'manager', 'owner'];
const press: readonly Role[] = ['mixer', 'operator', 'manager', 'owner'];

/** Who may record what; the server asks this again for every operation, by the role in its grant. */
export const operationRoles: Readonly<Record<OperationType, readonly Role[]>> = {
  'batch-mixed': ink,
  'batch-released': ink,
  'bucket-issued': press,
  'bucket-returned': press,
  'bucket-relocated': press,
  'bucket-recounted': press,
  'bucket-discarded': ink,
  'bucket-adopted': ink,
  'shift-reported': ink,
  'formula-proposed': ink,
  /** Of these, whoever may record what is dropped. */
  'entry-dropped': press,
};

/** True when `person` may record an operation of this type. */
export function mayRecord(person: Role, type: OperationType): boolean {
  return operationRoles[type].includes(person);
}
