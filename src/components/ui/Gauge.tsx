import type { CSSProperties } from 'react';
import { type Lab, filmOf } from './film.ts';

interface Props {
  lab: Lab | null;
  hiding: number;
  /** Any one unit for both. */
  reading: number;
  target: number;
  label: string;
}

/** The Strip as a gauge: the film grows to the tick at the target; past it, it is hatched. */
export function Gauge({ lab, hiding, reading, target, label }: Props) {
  const over = reading > target;
  const end = over ? reading : target / 0.88;
  const at = `${((target / end) * 100).toFixed(1)}%`;
  const film = filmOf(lab);
  const style = {
    '--film': lab === null ? 'var(--color-ink2)' : film.colour,
    '--hide': `${hiding}%`,
    '--pull': `${Math.min(100, (reading / end) * 100).toFixed(1)}%`,
  } as CSSProperties;
  return (
    <div className="gauge" role="img" aria-label={label}>
      <span className={`strip ${film.outline}`} style={style}>
        <i />
      </span>
      {over ? <span className="past" style={{ '--at': at } as CSSProperties} /> : null}
      <span className="tick" style={{ '--at': at } as CSSProperties} />
    </div>
  );
}
