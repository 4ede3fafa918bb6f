import type { Operation } from '#contract/operation.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { batchFields } from './batch-fields.ts';
import type { EntryField, EntryOption } from './entry-field.ts';
import {
  type BodyOf,
  type EntryNames,
  choice,
  containerField,
  field,
  fixed,
  inGrams,
  jobField,
  mass,
  optionsOf,
  placeField,
  text,
  tubField,
} from './make-fields.ts';

/** What an entry says, field by field, in the order in which a person would tell it. */
export function entryFields(operation: Operation, names: EntryNames): EntryField[] {
  switch (operation.type) {
    case 'batch-mixed':
      return batchFields(operation.body, names);
    case 'batch-released':
      return [
        fixed('Batch', batchName(operation.body.batchId, names)),
        text(['release', 'light'], 'Light', operation.body.release.light),
      ];
    case 'bucket-issued':
      return [
        tubField(operation.body.bucketId, names),
        jobField(operation.body.jobId, names),
        text(['overrideReason'], 'Reason, if it is not released', operation.body.overrideReason, { optional: true }),
      ];
    case 'bucket-returned':
      return [...weighedFields(operation.body, names), ...returnFields(operation.body, names)];
    case 'bucket-recounted':
      return weighedFields(operation.body, names);
    case 'bucket-relocated':
      return [
        tubField(operation.body.bucketId, names),
        placeField(['locationId'], operation.body.locationId, names, false),
      ];
    case 'bucket-discarded':
      return [
        tubField(operation.body.bucketId, names),
        fixed('Left the books', inGrams(operation.body.displayedMg, names)),
        text(['reason'], 'Reason', operation.body.reason),
        text(['note'], 'Note', operation.body.note, { optional: true, long: true }),
      ];
    case 'bucket-adopted':
      return adoptedFields(operation.body, names);
    case 'formula-proposed':
      return proposedFields(operation.body, names);
    case 'shift-reported':
      return [
        fixed('Batches', String(operation.body.batches)),
        fixed('Mixed', inGrams(operation.body.mixedMg, names)),
        text(['note'], 'Note', operation.body.note, { optional: true, long: true }),
      ];
    case 'entry-dropped':
      return [text(['reason'], 'Reason', operation.body.reason)];
  }
}

function weighedFields(body: BodyOf<'bucket-recounted'>, names: EntryNames): EntryField[] {
  return [
    tubField(body.bucketId, names),
    mass(['grossMg'], 'Gross weight', body.grossMg, names),
    mass(['tareMg'], 'Empty weight', body.tareMg, names, true),
  ];
}

const CONDITIONS: readonly EntryOption[] = [
  { value: 'clean', name: 'Clean' },
  { value: 'lint', name: 'Lint in it' },
  { value: 'reduced', name: 'Reduced' },
  { value: 'dirty', name: 'Dirty' },
];

function returnFields(body: BodyOf<'bucket-returned'>, names: EntryNames): EntryField[] {
  return [
    choice(['condition'], 'Condition', body.condition, CONDITIONS),
    jobField(body.jobId, names),
    placeField(['locationId'], body.locationId, names),
  ];
}

function adoptedFields(body: BodyOf<'bucket-adopted'>, names: EntryNames): EntryField[] {
  return [
    field(['code'], 'Tub code', body.code, formatBucketCode(body.code), { kind: 'code' }),
    text(['name'], 'Name', body.name),
    choice(['familyId'], 'Ink family', body.familyId, optionsOf(names.families, 'name')),
    containerField(['containerId'], body.containerId, names),
    mass(['grossMg'], 'Gross weight', body.grossMg, names),
    mass(['tareMg'], 'Empty weight', body.tareMg, names, true),
    placeField(['locationId'], body.locationId, names),
  ];
}

function proposedFields(body: BodyOf<'formula-proposed'>, names: EntryNames): EntryField[] {
  return [
    fixed('Formula', names.formulas.get(body.formulaId)?.name ?? 'Not on this device'),
    text(['name'], 'New name', body.name, { optional: true }),
    ...body.parts.map(({ componentId, parts }, n) =>
      text(['parts', n, 'parts'], names.components.get(componentId)?.name ?? 'An ink', parts),
    ),
    text(['note'], 'Note', body.note, { optional: true, long: true }),
  ];
}

function batchName(id: string, { batches, formulas }: EntryNames): string {
  return formulas.get(batches.get(id)?.formulaId ?? '')?.name ?? 'Not on this device';
}
