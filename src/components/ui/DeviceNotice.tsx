interface Props {
  glyph: 'g-warn' | 'g-clock' | 'g-device';
  text: string;
  /** What the key says, and does. */
  act?: { label: string; go: () => void };
}

/** One thing that a person should know of this device, with at most one key. */
export function DeviceNotice({ glyph, text, act }: Props) {
  return (
    <div className="note mt-2" role="status">
      <span className={`g ${glyph}`}>{text}</span>
      {act === undefined ? null : (
        <button type="button" className="key" onClick={act.go}>
          {act.label}
        </button>
      )}
    </div>
  );
}
