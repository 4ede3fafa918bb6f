interface Props<T extends string> {
  label: string;
  options: readonly { value: T; name: string; detail?: string }[];
  value: T | null;
  onChoose: (value: T) => void;
  className?: string;
}

/** One of a few, as keys; the arrow keys move between them. */
export function Choices<T extends string>({ label, options, value, onChoose, className = 'grid gap-2' }: Props<T>) {
  const tabbed = options.some((option) => option.value === value) ? value : options[0]?.value;
  const move = (event: React.KeyboardEvent<HTMLButtonElement>, from: number) => {
    const step = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }[event.key];
    const next = step === undefined ? undefined : options[(from + step + options.length) % options.length];
    if (next === undefined) return;
    event.preventDefault();
    onChoose(next.value);
    event.currentTarget.parentElement?.querySelector<HTMLElement>(`[data-value="${next.value}"]`)?.focus();
  };
  return (
    <div className={className} role="radiogroup" aria-label={label}>
      {options.map((option, n) => (
        <button
          key={option.value}
          type="button"
          role="radio"
          className="key px-2"
          data-value={option.value}
          aria-checked={option.value === value}
          tabIndex={option.value === tabbed ? 0 : -1}
          onClick={() => onChoose(option.value)}
          onKeyDown={(event) => move(event, n)}
        >
          {option.name}
          {option.detail === undefined ? null : <small>{option.detail}</small>}
        </button>
      ))}
    </div>
  );
}
