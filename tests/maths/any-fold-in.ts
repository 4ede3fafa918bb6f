import { type Composition, compositionFromMasses } from '#domain/composition.ts';
import type { FoldInProblem } from '#domain/fold-in.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';

/** Any problem at all, with corners that no shop has: no buckets, K = 0, ranges, tubs that must be used, odd steps. */
export function anyFoldIn(seed: number): FoldInProblem {
  const random = seededRandom(seed * 7919);
  const ids = ['a', 'b', 'c', 'd', 'e', 'f'].slice(0, random.int(1, 6));
  const target = anyComposition(random, ids);
  const step = random.pick([10, 100, 500, 1000]);
  const batch = step * random.int(20, 20_000);
  const more = random.next() < 0.3 ? step * random.int(0, 20_000) : 0;
  const part = (share: number) => Math.round(batch * share);
  const tau = random.pick([0, 0, 0.001, 0.01, 0.05]);
  const tolerance = ids.filter(() => tau > 0 && random.next() < 0.8);
  return {
    target,
    batch: { minimum: mg(batch), maximum: mg(batch + more) },
    buckets: Array.from({ length: random.int(0, 12) }, (_, n) => ({
      id: `b${n}`,
      usable: mg(random.int(0, part(1.2))),
      composition: random.next() < 0.5 ? anyComposition(random, ids) : near(random, target),
      mustUse: random.next() < 0.06,
    })),
    tolerance: new Map(tolerance.map((id) => [id, Math.round(tau * 1e9 * random.next()) as PartsPerBillion])),
    readability: mg(step),
    minimumFromBucket: mg(random.pick([0, step, part(0.05), 777])),
    minimumFresh: mg(random.pick([0, step, 5 * step, part(0.02), 333])),
    sliver: mg(random.pick([0, step, part(0.05)])),
    maximumBuckets: random.pick([0, 1, 2, 3, 4, 20]),
    worthOpening: mg(random.pick([0, 0, part(0.03), part(0.1)])),
  };
}

const mg = (mass: number) => mass as Milligrams;

function anyComposition(random: Random, ids: readonly string[]): Composition {
  const masses = ids.map((componentId) => ({
    componentId,
    mass: mg(random.next() < 0.3 ? 0 : random.pick([1, 2, 5, 10, 50, random.int(1, 1000)])),
  }));
  return masses.some(({ mass }) => mass > 0) ? compositionFromMasses(masses) : anyComposition(random, ids);
}

/** The same with each share a few per cent off, as it is weighed. */
function near(random: Random, target: Composition): Composition {
  return compositionFromMasses(
    [...target].map(([componentId, share]) => ({
      componentId,
      mass: mg(Math.max(1, Math.round(share * (0.97 + 0.06 * random.next())))),
    })),
  );
}
