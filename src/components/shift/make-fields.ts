import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Row, TableName } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { EntryField, EntryKind, EntryOption } from './entry-field.ts';

type Rows<T extends TableName> = ReadonlyMap<string, Row<T>>;

/** What gives the ids of an entry their names. */
export interface EntryNames {
  locale: string;
  formulas: Rows<'formulas'>;
  buckets: Rows<'buckets'>;
  jobs: Rows<'jobs'>;
  locations: Rows<'locations'>;
  containers: Rows<'containers'>;
  components: Rows<'components'>;
  lots: Rows<'lots'>;
  families: Rows<'families'>;
  batches: Rows<'batches'>;
}

export type BodyOf<T extends OperationBody['type']> = Extract<OperationBody, { type: T }>['body'];

export function field(
  path: EntryField['path'],
  label: string,
  value: unknown,
  words: string,
  kind: EntryKind,
): EntryField {
  return { ...kind, path, label, value, words };
}

export const fixed = (label: string, words: string) => field([label], label, undefined, words, { kind: 'fixed' });

export function text(
  path: EntryField['path'],
  label: string,
  value: string | null | undefined,
  { optional = false, long = false } = {},
): EntryField {
  return field(path, label, value, value ?? 'None', { kind: 'text', optional, long });
}

export function mass(path: EntryField['path'], label: string, mg: number, names: EntryNames, zero = false): EntryField {
  return field(path, label, mg, inGrams(mg, names), { kind: 'mass', zero });
}

/** What is not on this device stays as it is until another one is chosen. */
export function choice(
  path: EntryField['path'],
  label: string,
  value: EntryOption['value'],
  known: readonly EntryOption[],
) {
  const chosen = known.find((option) => option.value === value);
  const options = chosen === undefined ? [{ value, name: 'Not in this shop' }, ...known] : known;
  return field(path, label, value, chosen?.name ?? 'Not in this shop', { kind: 'choice', options });
}

export function optionsOf<K extends string>(rows: ReadonlyMap<string, { id: string } & Record<K, string>>, name: K) {
  const options = [...rows.values()].map((row): EntryOption => ({ value: row.id, name: row[name] }));
  return options.sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true }));
}

export function jobField(jobId: string | null, { jobs }: EntryNames): EntryField {
  return choice(['jobId'], 'Job', jobId, [{ value: null, name: 'No job' }, ...optionsOf(jobs, 'number')]);
}

export function placeField(path: EntryField['path'], id: string | null, { locations }: EntryNames, none = true) {
  const places = optionsOf(locations, 'code');
  return choice(path, 'Place', id, none ? [{ value: null, name: 'No place yet' }, ...places] : places);
}

export function containerField(path: EntryField['path'], id: string, { containers }: EntryNames): EntryField {
  return choice(path, 'Container', id, optionsOf(containers, 'name'));
}

export function tubField(id: string, { buckets }: EntryNames): EntryField {
  const tub = buckets.get(id);
  return fixed('Tub', tub === undefined ? 'Not on this device' : `${formatBucketCode(tub.code)} · ${tub.name}`);
}

export function inGrams(mg: number, { locale }: EntryNames): string {
  const step = [100, 10, 1].find((size) => mg % size === 0) ?? 1;
  return `${formatGrams(mg as Milligrams, step as Milligrams, locale)} g`;
}
