import type { Milligrams } from '#domain/mass.ts';

/** A tub on the scale; `displayedMg`: what the screen showed as its content, below zero where records disagree. */
export interface TubReading {
  grossMg: Milligrams;
  tareMg: Milligrams;
  displayedMg: number;
}

export interface WeighedTub {
  netMg: Milligrams;
  /** What the books change by: net − displayed. */
  deltaMg: number;
  /** Above zero when there is more in it than the books say: ask whether it is the right tub. */
  heavierMg: number;
}

/** Net and change of a tub weighed with its ink; undefined: gross below the tare, which no tub can be. */
export function weighBack({ grossMg, tareMg, displayedMg }: TubReading): WeighedTub | undefined {
  if (grossMg < tareMg) return undefined;
  const netMg = (grossMg - tareMg) as Milligrams;
  const deltaMg = netMg - displayedMg;
  return { netMg, deltaMg, heavierMg: Math.max(0, deltaMg) };
}
