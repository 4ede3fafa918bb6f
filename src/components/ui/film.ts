import { type Lab, cssColourOf } from '#domain/colour.ts';

export type { Lab };

/** The colour of a film, and the outline it needs to stand out on the black or the white half. */
export function filmOf(lab: Lab | null): { colour: string; outline: 'dark' | 'pale' | '' } {
  if (lab === null) return { colour: 'transparent', outline: '' };
  const outline = lab.l < 38 ? 'dark' : lab.l > 90 ? 'pale' : '';
  return { colour: cssColourOf(lab), outline };
}
