import { parseBucketCode } from '#domain/bucket-code.ts';
import { parseMass } from '#domain/parse-mass.ts';

export interface EntryOption {
  /** Null: none. */
  value: string | number | null;
  name: string;
}

/** How a person types a field; `fixed` is only shown. Masses are whole mg, typed in g. */
export type EntryKind =
  | { kind: 'fixed' }
  | { kind: 'mass'; zero: boolean }
  | { kind: 'text'; optional: boolean; long: boolean }
  | { kind: 'code' }
  | { kind: 'choice'; options: readonly EntryOption[] };

/** One thing that an entry says: where it stands in the body, and in words. */
export type EntryField = EntryKind & {
  path: readonly (string | number)[];
  label: string;
  value: unknown;
  /** In the words of the room. */
  words: string;
};

export const keyOf = ({ path }: Pick<EntryField, 'path'>) => path.join('.');

/** The field as it would be typed; of a choice the place of its option. */
export function typedOf(field: EntryField): string {
  if (field.kind === 'choice') return String(field.options.findIndex(({ value }) => value === field.value));
  if (field.kind === 'mass') return typedGrams(Number(field.value));
  return field.value === null || field.value === undefined ? '' : String(field.value);
}

export type ReadField = { value: unknown } | { problem: string };

/** @returns what goes into the body, or a sentence that says what to do */
export function readField(field: EntryField, text: string): ReadField {
  const typed = text.trim();
  if (text === typedOf(field) && field.kind !== 'choice') return { value: field.value };
  switch (field.kind) {
    case 'fixed':
      return { value: field.value };
    case 'mass': {
      if (field.zero && /^0+([.,]0*)?$/.test(typed)) return { value: 0 };
      const read = parseMass(typed, { unit: 'g' });
      return 'problem' in read ? read : { value: read.mass };
    }
    case 'text':
      if (typed !== '') return { value: typed };
      return field.optional ? { value: null } : { problem: 'Say it in a few words.' };
    case 'code': {
      const read = parseBucketCode(typed);
      return 'problem' in read ? read : { value: read.code };
    }
    case 'choice': {
      const option = field.options[Number(typed)];
      return option === undefined ? { problem: 'Choose one.' } : { value: option.value };
    }
  }
}

/** Three decimals get a fourth, or they could mean thousands. */
function typedGrams(mg: number): string {
  const decimals = mg % 100 === 0 ? 1 : mg % 10 === 0 ? 2 : 4;
  return (mg / 1000).toFixed(decimals);
}
