import type { Grade } from './compatibility.ts';
import { type Composition, requireWhole } from './composition.ts';
import { type Milligrams, WHOLE, milligrams } from './mass.ts';
import { UncertaintyError, combined } from './uncertainty-terms.ts';

/** What a shop knows beyond its scales, as standard uncertainties (k = 1). */
export interface ShopTerms {
  /** Of a share of what came back: what clung to the wall before, what the press brought. */
  wallResidue: number;
  pressContamination: number;
  /** Relative, of water-based ink that stood open. */
  evaporation: number;
  /** Relative, of a component's strength from lot to lot. */
  lotStrength: number;
  /** Of a share that was assumed and never weighed, as the shop states it. */
  assumed: number;
}

/** A leftover that goes in. */
export interface UncertainSource {
  composition: Composition;
  /** mg, and the standard uncertainty of it in mg. */
  mass: Milligrams;
  massUncertainty: number;
  grade: Grade;
  isWaterBased: boolean;
  /** Of each share, from its own weighing; what is absent is 0. */
  shares: ReadonlyMap<string, number>;
  /** Tubs of one batch are wrong in the same way. */
  batchId: string;
}

export interface UncertainFresh {
  componentId: string;
  mass: Milligrams;
  massUncertainty: number;
}

/**
 * Standard uncertainty of each share of a batch with leftovers, dimensionless (core mathematics F):
 * u²(f_j) = [Σ_i (r_ij − f_j)²u²(x_i) + Σ_k (δ_jk − f_j)²u²(y_k) + Σ_g (Σ_{i∈g} x_i u(r_ij))²]/M², g = tubs of one batch.
 * @throws UncertaintyError for a source whose contents are unknown, MassError, CompositionError
 */
export function foldInUncertainty(
  batch: { sources: readonly UncertainSource[]; fresh: readonly UncertainFresh[] },
  terms: ShopTerms,
): ReadonlyMap<string, number> {
  requireBatch(batch, terms);
  const { sources, fresh } = batch;
  const total = [...sources, ...fresh].reduce((sum, { mass }) => sum + mass, 0);
  if (total === 0) throw new UncertaintyError('Nothing is in the batch: there are no shares to be sure of.');
  const ids = new Set([
    ...sources.flatMap(({ composition }) => [...composition.keys()]),
    ...fresh.map((one) => one.componentId),
  ]);
  return new Map([...ids].map((id) => [id, Math.sqrt(varianceOf(id, batch, terms, total)) / total]));
}

function varianceOf(
  id: string,
  { sources, fresh }: { sources: readonly UncertainSource[]; fresh: readonly UncertainFresh[] },
  terms: ShopTerms,
  total: number,
): number {
  const shareIn = ({ composition }: UncertainSource) => (composition.get(id) ?? 0) / WHOLE;
  const isIt = ({ componentId }: UncertainFresh) => Number(componentId === id);
  const held = sources.reduce((sum, source) => sum + source.mass * shareIn(source), 0);
  const share = (held + fresh.reduce((sum, one) => sum + one.mass * isIt(one), 0)) / total;
  const groups = new Map<string, number>();
  let variance = 0;
  for (const source of sources) {
    variance += ((shareIn(source) - share) * source.massUncertainty) ** 2;
    const off = source.mass * sourceShareUncertainty(source, id, terms);
    groups.set(source.batchId, (groups.get(source.batchId) ?? 0) + off);
  }
  for (const one of fresh) variance += ((isIt(one) - share) * one.massUncertainty) ** 2;
  for (const off of groups.values()) variance += off * off;
  return variance;
}

/** Of one share of a leftover: its own weighing, and what its grade adds. */
export function sourceShareUncertainty(source: UncertainSource, id: string, terms: ShopTerms): number {
  const share = (source.composition.get(id) ?? 0) / WHOLE;
  if (source.grade === 'assumed') return terms.assumed;
  const own = source.shares.get(id) ?? 0;
  // A component that is e stronger than it should be changes its share r by e·r(1 − r).
  const lots = terms.lotStrength * share * (1 - share);
  const dried = source.isWaterBased ? terms.evaporation * share : 0;
  if (source.grade === 'untouched') return combined(own, lots, dried);
  return combined(own, lots, dried, terms.wallResidue, terms.pressContamination);
}

function requireBatch(
  { sources, fresh }: { sources: readonly UncertainSource[]; fresh: readonly UncertainFresh[] },
  terms: ShopTerms,
): void {
  for (const [name, value] of Object.entries(terms)) requireUncertainty(name, value);
  for (const { mass, massUncertainty } of [...sources, ...fresh]) {
    milligrams(mass);
    requireUncertainty('The uncertainty of a mass', massUncertainty);
  }
  for (const { composition, grade, shares } of sources) {
    requireWhole(composition);
    for (const value of shares.values()) requireUncertainty('The uncertainty of a share', value);
    if (grade === 'unknown')
      throw new UncertaintyError('What is in that tub is unknown. It is never folded in by composition.');
  }
}

function requireUncertainty(name: string, value: number): void {
  if (!(value >= 0 && Number.isFinite(value))) throw new UncertaintyError(`${name} is 0 or more, not ${value}.`);
}
