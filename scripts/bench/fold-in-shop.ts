import { type Composition, blend, compositionFromMasses } from '#domain/composition.ts';
import type { FoldInProblem } from '#domain/fold-in.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';

/** What is asked of every instance of one row of the table. */
export interface Ask {
  buckets: number;
  tolerance: boolean;
  maximumBuckets: number;
  worthOpening: Milligrams;
}

type Bucket = FoldInProblem['buckets'][number];

const EXTENDERS = ['base', 'clear', 'white'];
const PIGMENTS = Array.from({ length: 21 }, (_, n) => `pigment${n}`);
const STRONG = new Set(['pigment0', 'pigment1', 'pigment2']);
const grams = (mass: number) => Math.round(mass * 1000) as Milligrams;

/** A shop's shelf and one batch: 24 components, formulas of 2 to 9 and their variants, blends, strays. */
export function makeShop(seed: number, ask: Ask): FoldInProblem {
  const random = seededRandom(seed);
  const formulas = Array.from({ length: 40 }, () => formula(random));
  const variants = formulas.flatMap((of) => Array.from({ length: 4 }, () => variant(random, of)));
  const target = random.pick(variants);
  const near = variants.filter((other) => sharesPigments(other, target));
  const buckets = Array.from({ length: ask.buckets }, (_, n) => bucket(random, `b${n}`, near, variants));
  const batch = grams(random.pick([500, 800, 1000, 1500, 2500, 5000]));
  return {
    target: recipe(target),
    batch: { minimum: batch, maximum: batch },
    buckets,
    tolerance: ask.tolerance ? toleranceOf(recipe(target)) : new Map(),
    readability: grams(0.1),
    minimumFromBucket: grams(20),
    minimumFresh: grams(2),
    sliver: grams(30),
    maximumBuckets: ask.maximumBuckets,
    worthOpening: ask.worthOpening,
  };
}

export function formula(random: Random): Map<string, number> {
  const parts = new Map<string, number>([['base', random.int(300, 900)]]);
  if (random.next() < 0.5) parts.set('white', random.int(20, 400));
  if (random.next() < 0.3) parts.set('clear', random.int(20, 300));
  const pigments = random.int(1, 6);
  while (parts.size < pigments + 1) parts.set(random.pick(PIGMENTS), random.int(2, 140));
  return parts;
}

/** The same inks in other amounts: lighter, darker, a little off. */
export function variant(random: Random, of: ReadonlyMap<string, number>): Map<string, number> {
  const depth = random.pick([0.25, 0.5, 0.8, 1, 1.2]);
  return new Map(
    [...of].map(([id, parts]) => {
      const scale = EXTENDERS.includes(id) ? 1 : depth * (0.9 + 0.2 * random.next());
      return [id, Math.max(1, Math.round(parts * scale * 10))];
    }),
  );
}

export function bucket(random: Random, id: string, near: Map<string, number>[], all: Map<string, number>[]): Bucket {
  const kind = random.next();
  const one = () => weighed(random, random.pick(random.next() < 0.4 ? near : all));
  const usable = (Math.round(10 ** (1.5 + 1.8 * random.next()) * 10) * 100) as Milligrams;
  if (kind < 0.7) return { id, usable, composition: one() };
  const sources = [1, 2].map(() => ({ composition: one(), mass: grams(random.int(50, 500)) }));
  if (kind < 0.9) return { id, usable, composition: blend(sources) };
  const stray = new Map([[random.pick(PIGMENTS), 1_000_000_000 as PartsPerBillion]]);
  return { id, usable, composition: blend([...sources, { composition: stray, mass: grams(random.int(1, 5)) }]) };
}

/** A leftover knows its actual additions: each up to two scale steps off. */
function weighed(random: Random, parts: ReadonlyMap<string, number>): Composition {
  const batch = random.int(300, 3000);
  const total = [...parts.values()].reduce((a, b) => a + b, 0);
  return compositionFromMasses(
    [...parts].map(([componentId, part]) => {
      const steps = Math.max(1, Math.round((part / total) * batch * 10) + random.int(-2, 2));
      return { componentId, mass: (steps * 100) as Milligrams };
    }),
  );
}

export function recipe(parts: ReadonlyMap<string, number>): Composition {
  return compositionFromMasses([...parts].map(([componentId, mass]) => ({ componentId, mass: mass as Milligrams })));
}

export function sharesPigments(a: ReadonlyMap<string, number>, b: ReadonlyMap<string, number>): boolean {
  return [...a.keys()].every((id) => b.has(id) || EXTENDERS.includes(id));
}

/** The defaults of a new shop: base and extender loose, pigment 2 % of its share, strong 1 %, foreign extender 2 %. */
export function toleranceOf(target: Composition): Map<string, PartsPerBillion> {
  const tolerance = new Map<string, PartsPerBillion>();
  for (const id of EXTENDERS) tolerance.set(id, (target.has(id) ? 50_000_000 : 20_000_000) as PartsPerBillion);
  for (const [id, share] of target) {
    if (EXTENDERS.includes(id)) continue;
    tolerance.set(id, Math.round(share * (STRONG.has(id) ? 0.01 : 0.02)) as PartsPerBillion);
  }
  return tolerance;
}
