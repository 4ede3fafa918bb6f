import type { Operation } from '#contract/operation.ts';
import { type EntryField, keyOf, typedOf } from './entry-field.ts';
import { entryFields } from './entry-fields.ts';
import type { EntryNames } from './make-fields.ts';

const FEW = 6;

/** What was left empty is not told. */
const isSaid = (field: EntryField) => field.kind !== 'text' || typedOf(field) !== '';

/** An entry as it was recorded, in words and numbers; a long one opens on demand. */
export function EntryWords({ operation, names }: { operation: Operation; names: EntryNames }) {
  const fields = entryFields(operation, names).filter(isSaid);
  const shown = fields.length > FEW + 1 ? fields.slice(0, FEW) : fields;
  const rest = fields.slice(shown.length);
  const rows = (some: typeof fields) => (
    <dl className="sum">
      {some.map((field) => (
        <div key={keyOf(field)} className="contents">
          <dt className="ink2">{field.label}</dt>
          <dd className={field.kind === 'mass' ? 'num' : ''}>{field.words}</dd>
        </div>
      ))}
    </dl>
  );
  return (
    <div>
      {rows(shown)}
      {rest.length === 0 ? null : (
        <details>
          <summary className="key text wide">{rest.length} more</summary>
          {rows(rest)}
        </details>
      )}
    </div>
  );
}
