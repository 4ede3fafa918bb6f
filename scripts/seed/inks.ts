import type { Row } from '#contract/rows.ts';

/** The demo shop's inks: invented. Densities and cure temperatures are common practice, no source. */
export interface InkSpec {
  code: string;
  name: string;
  kind: Row<'components'>['kind'];
  family: FamilyName;
  density: string;
  strong: boolean;
  foreignLimitPpb: number;
  cureC: number;
  lab: [number, number, number];
  hiding: number;
  /** How much one part of it colours a mix, beside white. Preview only. */
  tint: number;
}

export type FamilyName =
  'Standard plastisol' | 'Low-bleed' | 'Blocker' | 'Low-cure' | 'Water-based' | 'Discharge' | 'Silicone';

const FOREIGN_EXTENDER = 20_000_000;

const plastisol = (code: string, name: string, kind: InkSpec['kind'], rest: Partial<InkSpec>): InkSpec => ({
  code,
  name,
  kind,
  family: 'Standard plastisol',
  density: '1.10',
  strong: false,
  foreignLimitPpb: 0,
  cureC: 160,
  lab: [95, 0, 2],
  hiding: 80,
  tint: 6,
  ...rest,
});

export const INKS: readonly InkSpec[] = [
  plastisol('P-01', 'Clear base, soft hand', 'base', {
    foreignLimitPpb: FOREIGN_EXTENDER,
    lab: [94, 0, 4],
    hiding: 10,
    tint: 0.05,
  }),
  plastisol('P-02', 'Clear base, gloss', 'clear', {
    foreignLimitPpb: FOREIGN_EXTENDER,
    lab: [94, 0, 3],
    hiding: 8,
    tint: 0.05,
  }),
  plastisol('P-03', 'Mixing white', 'white', { density: '1.35', lab: [96, 0, 1], hiding: 96, tint: 1 }),
  plastisol('P-10', 'Bright blue concentrate', 'pigment', { lab: [36, 8, -56], hiding: 72 }),
  plastisol('P-11', 'Deep violet concentrate', 'pigment', { strong: true, lab: [26, 34, -40], hiding: 70, tint: 8 }),
  plastisol('P-12', 'Carbon black concentrate', 'pigment', { strong: true, lab: [12, 0, 0], hiding: 98, tint: 10 }),
  plastisol('P-13', 'Warm red concentrate', 'pigment', { strong: true, lab: [46, 64, 44], hiding: 78 }),
  plastisol('P-14', 'Magenta concentrate', 'pigment', { strong: true, lab: [40, 66, -8], hiding: 70 }),
  plastisol('P-15', 'Golden yellow concentrate', 'pigment', { density: '1.16', lab: [76, 20, 82], hiding: 76 }),
  plastisol('P-16', 'Lemon yellow concentrate', 'pigment', { density: '1.14', lab: [88, -8, 84], hiding: 66 }),
  plastisol('P-17', 'Leaf green concentrate', 'pigment', { strong: true, lab: [42, -52, 20], hiding: 74, tint: 8 }),
  plastisol('P-18', 'Orange concentrate', 'pigment', { lab: [62, 48, 66], hiding: 74 }),
  plastisol('P-19', 'Turquoise concentrate', 'pigment', { strong: true, lab: [48, -36, -28], hiding: 72, tint: 8 }),
  plastisol('P-20', 'Brown oxide concentrate', 'pigment', { density: '1.30', lab: [34, 22, 24], hiding: 90 }),
  plastisol('P-30', 'Fluorescent pink', 'fluorescent', { lab: [64, 76, 10], hiding: 50 }),
  plastisol('P-31', 'Silver flake base', 'effect', { density: '1.20', lab: [72, 0, 0], hiding: 88 }),
  plastisol('P-40', 'Viscosity reducer', 'additive', { density: '1.00', lab: [95, 0, 2], hiding: 2, tint: 0.01 }),
  plastisol('L-01', 'Low-bleed white', 'ready', { family: 'Low-bleed', density: '1.38', hiding: 97 }),
  plastisol('B-01', 'Blocker grey', 'ready', { family: 'Blocker', density: '1.44', lab: [40, 0, 0], hiding: 99 }),
  plastisol('C-01', 'Low-cure clear base', 'base', { family: 'Low-cure', cureC: 130, hiding: 10, tint: 0.05 }),
  plastisol('W-01', 'Water-based clear base', 'base', {
    family: 'Water-based',
    density: '1.02',
    cureC: 150,
    hiding: 6,
    tint: 0.05,
  }),
  plastisol('W-02', 'Water-based white', 'white', {
    family: 'Water-based',
    density: '1.28',
    cureC: 150,
    hiding: 90,
    tint: 1,
  }),
  plastisol('W-03', 'Water-based blue', 'pigment', {
    family: 'Water-based',
    density: '1.05',
    cureC: 150,
    lab: [34, 6, -52],
    hiding: 60,
  }),
  plastisol('D-01', 'Discharge base', 'base', {
    family: 'Discharge',
    density: '1.02',
    cureC: 160,
    hiding: 4,
    tint: 0.05,
  }),
];

export const FAMILIES: readonly { name: FamilyName; potLifeMin: number | null }[] = [
  { name: 'Standard plastisol', potLifeMin: null },
  { name: 'Low-bleed', potLifeMin: null },
  { name: 'Blocker', potLifeMin: null },
  { name: 'Low-cure', potLifeMin: null },
  { name: 'Water-based', potLifeMin: null },
  { name: 'Discharge', potLifeMin: 480 },
  { name: 'Silicone', potLifeMin: null },
];

/** Into × from: common practice, no source; what is not listed is "never". */
export const RULES: readonly { into: FamilyName; from: FamilyName; verdict: 'yes' | 'no'; reason: string }[] = [
  ...FAMILIES.map(({ name }) => ({ into: name, from: name, verdict: 'yes' as const, reason: 'Same family.' })),
  {
    into: 'Standard plastisol',
    from: 'Low-bleed',
    verdict: 'no',
    reason: 'Low-bleed ink ghosts in standard plastisol.',
  },
  {
    into: 'Standard plastisol',
    from: 'Blocker',
    verdict: 'no',
    reason: 'Blocker is no colour: it holds carbon black.',
  },
  { into: 'Standard plastisol', from: 'Low-cure', verdict: 'no', reason: 'The cure point would be unknown.' },
  { into: 'Low-bleed', from: 'Standard plastisol', verdict: 'no', reason: 'Standard ink dilutes the low-bleed one.' },
  { into: 'Low-cure', from: 'Standard plastisol', verdict: 'no', reason: 'Standard ink raises the cure point.' },
  { into: 'Water-based', from: 'Discharge', verdict: 'no', reason: 'Discharge base stays with its own.' },
];
