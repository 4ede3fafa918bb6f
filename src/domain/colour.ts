/** CIE L*a*b* under D50, as measured or as a formula's target. */
export interface Lab {
  l: number;
  a: number;
  b: number;
}

/** The CSS colour of a film; CSS Color 4 `lab()` is under D50 too, so nothing is converted. */
export function cssColourOf({ l, a, b }: Lab): string {
  return `lab(${l} ${a} ${b})`;
}
