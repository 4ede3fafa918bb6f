import type { Composition } from './composition.ts';
import { ceilDivide } from './least-error.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';

export const PPB = BigInt(WHOLE);

/** One component of the pot: what lies in it, and its share in ppb with the edges of its tolerance. */
export interface PotPart {
  id: string;
  /** mg·ppb, times the pot's `scale`. */
  held: bigint;
  share: bigint;
  tolerance: bigint;
  lower: bigint;
  upper: bigint;
}

/** What lies in a pot, exact. */
export interface RepairPot {
  parts: readonly PotPart[];
  /** mg, whole: the sum of what is held. */
  mass: bigint;
  /** 1, or what the amounts are multiplied by so that a scooped part of them is whole. */
  scale: bigint;
}

/** Adds up what was put in. */
export function potOf(
  contents: readonly { composition: Composition; mass: Milligrams }[],
  target: Composition,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): RepairPot {
  const held = new Map<string, bigint>();
  let mass = 0n;
  for (const source of contents) {
    const amount = BigInt(source.mass);
    mass += amount;
    for (const [id, share] of source.composition) held.set(id, (held.get(id) ?? 0n) + amount * BigInt(share));
  }
  return { parts: partsOf(held, target, tolerance), mass, scale: 1n };
}

/** The formula's components, also those that are not in yet, then the foreign ones. @param held mg·ppb */
export function partsOf(
  held: ReadonlyMap<string, bigint>,
  target: Composition,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): PotPart[] {
  const parts: PotPart[] = [];
  const add = (id: string, share: number) => {
    const off = tolerance.get(id) ?? 0;
    const [lower, upper] = [BigInt(Math.max(0, share - off)), BigInt(share + off)];
    parts.push({ id, held: held.get(id) ?? 0n, share: BigInt(share), tolerance: BigInt(off), lower, upper });
  };
  for (const [id, share] of target) add(id, share);
  for (const id of held.keys()) if (!target.has(id)) add(id, 0);
  return parts;
}

/** Without `removed` mg of one component, which must lie in it. */
export function withoutUnmixed(pot: RepairPot, id: string, removed: bigint): RepairPot {
  const less = (part: PotPart) => (part.id === id ? { ...part, held: part.held - removed * PPB * pot.scale } : part);
  return { ...pot, parts: pot.parts.map(less), mass: pot.mass - removed };
}

/** Without `removed` mg of all of it, mixed. */
export function withoutMixed(pot: RepairPot, removed: bigint): RepairPot {
  const mass = pot.mass - removed;
  const parts = pot.parts.map((part) => ({ ...part, held: part.held * mass }));
  return { parts, mass, scale: pot.scale * pot.mass };
}

/** Whether fresh ink can bring the pot to `total` mg with every component inside its tolerance. */
export function canBecome({ parts, scale }: RepairPot, total: bigint): boolean {
  const unit = total * scale;
  let least = 0n;
  for (const { held, lower, upper } of parts) {
    if (held > unit * upper) return false;
    const edge = unit * lower;
    least += held > edge ? held : edge;
  }
  return least <= unit * PPB;
}

/**
 * The least total from `from` on, whole steps above what lies in the pot, that it can become: max(p_j/(t_j + τ_j)) and
 * the root of the convex Σ max(p_j, M(t_j − τ_j)) − M, approached from below along its slope (core mathematics C).
 * @param from, step mg @returns mg, or undefined when no amount of fresh ink is enough
 */
export function leastTotal({ parts, mass, scale }: RepairPot, from: bigint, step: bigint): bigint | undefined {
  const onStep = (total: bigint) => (total <= mass ? mass : mass + ceilDivide(total - mass, step) * step);
  let total = from > mass ? from : mass;
  for (const { held, upper } of parts) {
    if (held <= total * upper * scale) continue;
    if (upper === 0n) return undefined;
    total = ceilDivide(held, upper * scale);
  }
  for (total = onStep(total); ;) {
    const unit = total * scale;
    let edges = 0n;
    let surplus = 0n;
    for (const { held, lower } of parts) {
      if (unit * lower > held) edges += lower;
      else surplus += held;
    }
    if (surplus <= unit * (PPB - edges)) return total;
    if (edges === PPB) return undefined;
    total = onStep(ceilDivide(surplus, (PPB - edges) * scale));
  }
}

/** The greatest distance of a share from its target at `total` mg, ppb, rounded up. */
export function worstDeviation({ parts, scale }: RepairPot, total: bigint): PartsPerBillion {
  const unit = total * scale;
  let worst = 0n;
  for (const { held, share } of parts) {
    const off = held - unit * share;
    const size = off < 0n ? -off : off;
    if (size > worst) worst = size;
  }
  return (unit === 0n ? 0 : Number(ceilDivide(worst, unit))) as PartsPerBillion;
}
