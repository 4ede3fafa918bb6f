const KEYS = ['1', '2', '3', '4', '5', '6', '7', '8', '9', '.', '0'];

/** Nine and zero, one decimal key, one erase key; each press is handed on as its character. */
export function Keypad({ onKey, className = '' }: { onKey: (key: string) => void; className?: string }) {
  return (
    <div className={`pad ${className}`} role="group" aria-label="Keypad">
      {KEYS.map((key) => (
        <button key={key} type="button" className="key" onClick={() => onKey(key)}>
          {key}
        </button>
      ))}
      <button type="button" className="key" aria-label="Erase" onClick={() => onKey('Backspace')}>
        <span className="g g-erase" />
      </button>
    </div>
  );
}
