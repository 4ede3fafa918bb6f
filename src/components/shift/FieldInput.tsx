import { useId } from 'react';
import { type EntryField, typedOf } from './entry-field.ts';

interface Props {
  field: EntryField;
  text: string | undefined;
  problem: string | undefined;
  onType: (text: string) => void;
}

/** One field of a correction; what is fixed is only told. */
export function FieldInput({ field, text = typedOf(field), problem, onType }: Props) {
  const id = useId();
  if (field.kind === 'fixed')
    return (
      <p className="told">
        <span className="ink2">{field.label}</span> <b>{field.words}</b>
      </p>
    );
  const known = {
    value: text,
    'aria-invalid': problem !== undefined,
    'aria-describedby': id,
    onChange: (event: React.ChangeEvent<HTMLInputElement | HTMLTextAreaElement | HTMLSelectElement>) =>
      onType(event.target.value),
  };
  return (
    <label className="field">
      <span>{field.kind === 'mass' ? `${field.label}, g` : field.label}</span>
      {field.kind === 'choice' ? (
        <select className="box" {...known}>
          {field.options.map(({ value, name }, n) => (
            <option key={String(value)} value={n}>
              {name}
            </option>
          ))}
        </select>
      ) : field.kind === 'text' && field.long ? (
        <textarea rows={2} maxLength={2000} {...known} />
      ) : (
        <input
          inputMode={field.kind === 'mass' ? 'decimal' : 'text'}
          className={field.kind === 'mass' ? 'num' : ''}
          autoComplete="off"
          maxLength={200}
          {...known}
        />
      )}
      <small id={id} className={problem === undefined ? 'hidden' : 'badge warn g-warn whitespace-normal'}>
        {problem}
      </small>
    </label>
  );
}
