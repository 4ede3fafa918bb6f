import { FIRST, SECOND } from './colour-words.ts';
import { INKS } from './inks.ts';
import type { Random } from './random.ts';

export interface Recipe {
  code: string;
  name: string;
  family: string;
  /** Newest last; each is a list of ink code and parts. */
  revisions: { state: 'draft' | 'approved' | 'retired'; parts: [string, string][] }[];
}

/** Pigments of a colour and their proportion at full strength, of 100 parts. */
const ARCHETYPES: readonly [string, number][][] = [
  [
    ['P-10', 11.9],
    ['P-11', 3.4],
    ['P-12', 1.2],
  ],
  [
    ['P-13', 14],
    ['P-18', 2.5],
  ],
  [
    ['P-17', 9],
    ['P-12', 1.8],
    ['P-15', 3],
  ],
  [
    ['P-15', 13],
    ['P-20', 2],
  ],
  [
    ['P-11', 6],
    ['P-14', 4.5],
  ],
  [
    ['P-19', 8],
    ['P-10', 2],
  ],
  [
    ['P-12', 9],
    ['P-10', 1.5],
  ],
  [
    ['P-14', 11],
    ['P-13', 3],
  ],
  [
    ['P-18', 12],
    ['P-16', 3.5],
  ],
  [
    ['P-20', 9],
    ['P-13', 2],
    ['P-12', 0.8],
  ],
  [['P-16', 14]],
  [
    ['P-17', 5],
    ['P-16', 8],
  ],
  [
    ['P-19', 4],
    ['P-17', 4],
    ['P-12', 0.5],
  ],
  [
    ['P-12', 3],
    ['P-20', 1.5],
    ['P-10', 0.8],
  ],
  [['P-10', 12]],
  [
    ['P-13', 6],
    ['P-14', 6],
    ['P-11', 1.4],
    ['P-12', 0.4],
  ],
];
/** Five depths of each: a lighter one can be used up in a deeper one. */
const DEPTHS = [1, 0.62, 0.36, 0.19, 0.09];

const decimal = (value: number) => (Math.round(value * 100) / 100).toString();

/** 400 formulas in sets of five depths; QF-0317 is Harbour dusk and QF-0302 its lightest, Winter sky. */
export function makeRecipes(random: Random): Recipe[] {
  const names = shuffled(
    FIRST.flatMap((a) => SECOND.map((b) => `${a} ${b}`)).filter(
      (name) => name !== 'Harbour dusk' && name !== 'Winter sky',
    ),
    random,
  );
  const recipes: Recipe[] = [];
  for (let set = 0; set < 76; set++) {
    const pigments = ARCHETYPES[set % ARCHETYPES.length] as [string, number][];
    const twist = 0.75 + 0.5 * random.next();
    const base = random.next() < 0.8 ? 'P-01' : 'P-02';
    for (const [n, depth] of DEPTHS.entries()) {
      const number = set * 5 + n + 1;
      const [code, name] = named(number, names);
      recipes.push({
        code,
        name,
        family: 'Standard plastisol',
        revisions: revisionsOf(pigments, depth, set === 0 ? 1 : twist, base, random, number),
      });
    }
  }
  recipes.push(...others(names, random));
  return recipes;
}

function named(number: number, names: string[]): [string, string] {
  if (number === 1) return ['QF-0317', 'Harbour dusk'];
  if (number === 4) return ['QF-0302', 'Winter sky'];
  const taken = number === 317 ? 1 : number === 302 ? 4 : number;
  return [`QF-${String(taken).padStart(4, '0')}`, names.pop() as string];
}

function revisionsOf(
  pigments: readonly [string, number][],
  depth: number,
  twist: number,
  base: string,
  random: Random,
  number: number,
): Recipe['revisions'] {
  const partsOf = (factor: number): [string, string][] => {
    const colour = pigments.map(([ink, parts]): [string, number] => [ink, parts * depth * factor]);
    const used = colour.reduce((sum, [, parts]) => sum + parts, 0);
    const white = 20;
    return [
      [base, decimal(100 - white - used)],
      ['P-03', decimal(white)],
      ...colour.map(([ink, parts]): [string, string] => [ink, decimal(Math.max(0.05, parts))]),
    ];
  };
  const approved = { state: 'approved' as const, parts: partsOf(twist) };
  if (number === 1)
    return [1.12, 1.05, 0.97]
      .map((factor) => ({ state: 'retired' as const, parts: partsOf(factor) }))
      .concat(approved as never);
  if (number % 7 === 0) return [{ state: 'retired', parts: partsOf(twist * 1.06) }, approved];
  if (number % 31 === 0) return [{ state: 'draft', parts: partsOf(twist) }];
  if (number % 23 === 0) return [approved, { state: 'draft', parts: partsOf(twist * (0.95 + 0.02 * random.next())) }];
  return [approved];
}

/** Twenty of other families and kinds. */
function others(names: string[], random: Random): Recipe[] {
  const sets: { family: string; parts: () => [string, string][] }[] = [
    {
      family: 'Water-based',
      parts: () => [
        ['W-01', decimal(random.int(70, 88))],
        ['W-02', decimal(random.int(5, 15))],
        ['W-03', decimal(random.int(2, 9))],
      ],
    },
    {
      family: 'Low-cure',
      parts: () => [
        ['C-01', decimal(random.int(75, 90))],
        ['P-03', '10'],
        ['P-13', decimal(random.int(3, 9))],
      ],
    },
    {
      family: 'Standard plastisol',
      parts: () => [
        ['P-02', '60'],
        ['P-30', decimal(random.int(30, 44))],
      ],
    },
    {
      family: 'Discharge',
      parts: () => [
        ['D-01', '92'],
        ['W-03', decimal(random.int(3, 8))],
      ],
    },
  ];
  return Array.from({ length: 20 }, (_, n) => {
    const set = sets[n % sets.length] as (typeof sets)[number];
    return {
      code: `QF-${String(381 + n).padStart(4, '0')}`,
      name: names.pop() as string,
      family: set.family,
      revisions: [{ state: 'approved', parts: set.parts() }],
    };
  });
}

function shuffled<T>(list: readonly T[], random: Random): T[] {
  const result = [...list];
  for (let n = result.length - 1; n > 0; n--) {
    const at = random.int(0, n);
    [result[n], result[at]] = [result[at] as T, result[n] as T];
  }
  return result;
}

/** A preview from the inks' own values, weighted by how much they tint; no prediction. */
export function previewOf(parts: readonly [string, string][]): {
  lab: { l: number; a: number; b: number };
  hiding: number;
} {
  let weight = 0;
  const sum = { l: 0, a: 0, b: 0 };
  let hiding = 0;
  for (const [code, text] of parts) {
    const ink = INKS.find((entry) => entry.code === code);
    if (ink === undefined) throw new Error(`No ink ${code}.`);
    const part = Number(text);
    const tint = part * ink.tint;
    weight += tint;
    sum.l += ink.lab[0] * tint;
    sum.a += ink.lab[1] * tint;
    sum.b += ink.lab[2] * tint;
    hiding += ink.hiding * tint;
  }
  const round = (value: number) => Math.round((value / weight) * 10) / 10;
  return {
    lab: { l: round(sum.l), a: round(sum.a), b: round(sum.b) },
    hiding: Math.round(Math.min(98, hiding / weight)),
  };
}
