const MOST = 20;

export function Copies({ copies, onCopies }: { copies: number; onCopies: (copies: number) => void }) {
  return (
    <div className="copies">
      <span>Copies</span>
      <button
        type="button"
        className="key"
        aria-label="One less"
        disabled={copies === 1}
        onClick={() => onCopies(copies - 1)}
      >
        <span className="g g-minus" />
      </button>
      <b aria-live="polite">{copies}</b>
      <button
        type="button"
        className="key"
        aria-label="One more"
        disabled={copies === MOST}
        onClick={() => onCopies(copies + 1)}
      >
        <span className="g g-plus" />
      </button>
    </div>
  );
}
