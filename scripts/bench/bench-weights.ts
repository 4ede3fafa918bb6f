import { compositionFromMasses } from '#domain/composition.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type ScaleLimits, scaleWeights, smallestWeighableBatch } from '#domain/scale-weights.ts';
import { type Random, seededRandom } from '#scripts/seed/random.ts';
import { sayTimes, timeOf } from './say-target.ts';

const CASES = 300;
const bench: ScaleLimits = {
  readability: 100 as Milligrams,
  repeatability: 0 as Milligrams,
  minimum: 2000 as Milligrams,
  maximum: 6_000_000 as Milligrams,
  errorLimit: 0.03,
};

/** E: weights of 24 components, and the smallest batch of which all can be weighed. */
export function benchWeights(): void {
  const random = seededRandom(31);
  const cases = Array.from({ length: CASES }, () => wideFormula(random));
  const batches = cases.map(() => (random.int(500, 500_000) * 100) as Milligrams);
  const weigh = cases.map((target, n) => () => scaleWeights(target, batches[n] as Milligrams, bench.readability));
  const size = cases.map((target) => () => smallestWeighableBatch(target, bench));
  for (const ask of [...weigh, ...size]) ask();
  sayTimes('E, weights of 24 components', weigh.map(timeOf), 2);
  sayTimes('E, smallest weighable batch of 24 components', size.map(timeOf), 2);
}

/** A base with 23 others, from a trace to a tenth of it. */
function wideFormula(random: Random) {
  return compositionFromMasses(
    Array.from({ length: 24 }, (_, n) => {
      const mass = n === 0 ? random.int(200_000, 900_000) : Math.round(10 ** (2 + 3 * random.next()));
      return { componentId: `component-${n}`, mass: mass as Milligrams };
    }),
  );
}
