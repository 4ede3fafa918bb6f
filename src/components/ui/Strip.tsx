import type { CSSProperties } from 'react';
import { type Lab, filmOf } from './film.ts';

interface Props {
  lab: Lab | null;
  /** 0 to 100: how well the film covers black. */
  hiding: number;
  size?: 's' | 'l';
}

/** The swatch: a film of ink drawn across a half-white, half-black card. Always with its code or name beside it. */
export function Strip({ lab, hiding, size }: Props) {
  const film = filmOf(lab);
  const style = { '--film': film.colour, '--hide': `${hiding}%` } as CSSProperties;
  return (
    <span className={`strip ${film.outline} ${size ?? ''}`} style={style} aria-hidden="true">
      {lab === null ? null : <i />}
    </span>
  );
}
