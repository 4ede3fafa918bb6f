import Fraction from 'fraction.js';
import { type Milligrams, type PartsPerBillion, WHOLE, milligrams } from './mass.ts';
import { roundToSum } from './round-to-sum.ts';

/** Component id → whole ppb; the sum is exactly 1,000,000,000 and no entry is zero. */
export type Composition = ReadonlyMap<string, PartsPerBillion>;

/** Parts, masses or sources from which no composition can be made. */
export class CompositionError extends Error {
  override name = 'CompositionError';
}

const DECIMAL = /^\d{1,12}(?:\.\d{1,12})?$/;

/** @param parts decimal strings such as "12.5", each component once @throws CompositionError */
export function compositionFromParts(parts: readonly { componentId: string; parts: string }[]): Composition {
  const fractions = new Map<string, Fraction>();
  for (const { componentId, parts: text } of parts) {
    if (!DECIMAL.test(text)) throw new CompositionError(`"${text}" is not a number of parts. Write it like 12.5.`);
    if (fractions.has(componentId))
      throw new CompositionError('A component stands twice in the formula. Keep one line of it.');
    fractions.set(componentId, new Fraction(text));
  }
  const common = [...fractions.values()].reduce((all, { d }) => all.lcm(d), new Fraction(1));
  const amounts = new Map([...fractions].map(([id, part]) => [id, part.mul(common).n] as const));
  return compositionFromAmounts(amounts);
}

/** @param masses mg; masses of one component are added @throws CompositionError, MassError */
export function compositionFromMasses(masses: readonly { componentId: string; mass: Milligrams }[]): Composition {
  const amounts = new Map<string, bigint>();
  for (const { componentId, mass } of masses) addTo(amounts, componentId, BigInt(milligrams(mass)));
  return compositionFromAmounts(amounts);
}

/** What a pot holds after its sources are mixed; exact but for the rounding to whole ppb. @throws CompositionError */
export function blend(sources: readonly { composition: Composition; mass: Milligrams }[]): Composition {
  const amounts = new Map<string, bigint>();
  for (const { composition, mass } of sources) {
    requireWhole(composition);
    for (const [componentId, share] of composition)
      addTo(amounts, componentId, BigInt(milligrams(mass)) * BigInt(share));
  }
  // By id, so that a station and the server round a tie alike whatever order their sources came in.
  return compositionFromAmounts(new Map([...amounts].sort(([a], [b]) => (a < b ? -1 : 1))));
}

/** @throws CompositionError when the shares are not whole, not positive or do not add up to the whole */
export function requireWhole(composition: Composition): void {
  let sum = 0;
  for (const share of composition.values()) {
    if (!Number.isSafeInteger(share) || share <= 0)
      throw new CompositionError(`A share is whole ppb above 0, not ${share}.`);
    sum += share;
  }
  if (sum !== WHOLE) throw new CompositionError(`The shares add up to ${sum} ppb, not to 1,000,000,000.`);
}

function compositionFromAmounts(amounts: ReadonlyMap<string, bigint>): Composition {
  const total = [...amounts.values()].reduce((sum, amount) => sum + amount, 0n);
  if (total === 0n) throw new CompositionError('There is nothing in it: all amounts are 0.');
  const ids = [...amounts.keys()];
  const shares = roundToSum([...amounts.values()], total, WHOLE);
  return new Map(ids.flatMap((id, n) => (shares[n] === 0 ? [] : ([[id, shares[n] as PartsPerBillion]] as const))));
}

function addTo(amounts: Map<string, bigint>, id: string, amount: bigint): void {
  amounts.set(id, (amounts.get(id) ?? 0n) + amount);
}
