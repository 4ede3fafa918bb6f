import type { Addition } from '#contract/operation-bodies.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
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
  placeField,
  text,
} from './make-fields.ts';

/** A batch: what it was to be, what went in, and the tubs that it was filled into. */
export function batchFields(body: BodyOf<'batch-mixed'>, names: EntryNames): EntryField[] {
  return [
    fixed('Formula', names.formulas.get(body.formulaId)?.name ?? 'Not on this device'),
    revisionField(body, names),
    fixed('Planned', inGrams(body.plannedMg, names)),
    ...body.additions.flatMap((addition, n) => additionFields(addition, n, names)),
    ...body.filled.flatMap((tub, n) => filledFields(tub, n, body.filled.length, names)),
    jobField(body.jobId, names),
    ...(body.release === null ? [] : [text(['release', 'light'], 'Released under', body.release.light)]),
  ];
}

function revisionField({ formulaId, revision }: BodyOf<'batch-mixed'>, { formulas }: EntryNames): EntryField {
  const known = (formulas.get(formulaId)?.revisions ?? []).map((row): EntryOption => ({
    value: row.revision,
    name: `${row.revision}, ${row.state}`,
  }));
  return choice(['revision'], 'Revision', revision, known);
}

function additionFields(addition: Addition, n: number, names: EntryNames): EntryField[] {
  const weighed = (label: string) => mass(['additions', n, 'actualMg'], label, addition.actualMg, names);
  if (addition.kind === 'bucket') {
    const tub = names.buckets.get(addition.bucketId);
    return [weighed(tub === undefined ? 'From a tub' : `From ${formatBucketCode(tub.code)} · ${tub.name}`)];
  }
  const { componentId, lotId } = addition;
  const ink = names.components.get(componentId)?.name ?? 'An ink';
  const lots = [...names.lots.values()]
    .filter((lot) => lot.componentId === componentId)
    .map((lot): EntryOption => ({ value: lot.id, name: lot.code }));
  if (lotId === null && lots.length === 0) return [weighed(ink)];
  return [
    weighed(ink),
    choice(['additions', n, 'lotId'], `Lot of ${ink}`, lotId, [{ value: null, name: 'No lot' }, ...lots]),
  ];
}

function filledFields(
  { code, massMg, containerId, locationId }: BodyOf<'batch-mixed'>['filled'][number],
  n: number,
  tubs: number,
  names: EntryNames,
): EntryField[] {
  const of = (label: string) => (tubs === 1 ? label : `${label} of tub ${n + 1}`);
  const told = (other: EntryField) => ({ ...other, label: of(other.label) });
  return [
    field(['filled', n, 'code'], of('Tub code'), code, formatBucketCode(code), { kind: 'code' }),
    mass(['filled', n, 'massMg'], of('Filled'), massMg, names),
    told(containerField(['filled', n, 'containerId'], containerId, names)),
    told(placeField(['filled', n, 'locationId'], locationId, names)),
  ];
}
