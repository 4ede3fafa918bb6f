import type { Composition } from './composition.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { type Need, ceilDivide, minMaxSteps } from './min-max-steps.ts';

export type Tolerance = ReadonlyMap<string, PartsPerBillion>;

/** What lies in the pot, mg·ppb of each component, exact. */
export type Contents = ReadonlyMap<string, bigint>;

const PPB = BigInt(WHOLE);

/** Adds up sources; the sum over all components is mass·10⁹. */
export function contentsOf(sources: readonly { composition: Composition; mass: Milligrams }[]): Map<string, bigint> {
  const contents = new Map<string, bigint>();
  for (const { composition, mass } of sources) {
    for (const [id, share] of composition) contents.set(id, (contents.get(id) ?? 0n) + BigInt(mass) * BigInt(share));
  }
  return contents;
}

/** What is to be filled up; masses in mg. */
export interface Pot {
  target: Composition;
  tolerance: Tolerance;
  contents: Contents;
  readability: Milligrams;
  /** Components that get no more: what lies in the pot of them stays as it is. */
  settled?: ReadonlySet<string>;
  /** mg of fresh ink that a component gets at least. */
  least?: ReadonlyMap<string, Milligrams>;
}

/**
 * Fresh ink on the scale's steps that fills the pot up to `batch` with each component as near to its target as its
 * tolerance and what lies in the pot allow.
 * @param batch mg; where it does not differ from the contents by whole steps, the nearest total below counts
 * @returns undefined when no filling keeps within the tolerances
 */
export function fillPot(pot: Pot, batch: Milligrams): Map<string, Milligrams> | undefined {
  const unit = BigInt(pot.readability) * PPB;
  const held = [...pot.contents.values()].reduce((a, b) => a + b, 0n);
  const steps = (BigInt(batch) * PPB - held) / unit;
  if (BigInt(batch) * PPB < held) return undefined;
  const parts = partsOf(pot, held + steps * unit);
  const needs = exactNeeds(pot, parts, held + steps * unit);
  if (needs === undefined) return undefined;
  const bounded = needs.map((need, n) => stepsOf(need, parts[n] as Part, unit));
  const found = minMaxSteps(bounded, unit, steps);
  if (found === undefined) return undefined;
  return new Map(parts.map(({ id }, n) => [id, (Number(found.steps[n]) * pot.readability) as Milligrams] as const));
}

/** The step below the need or the one above it, neither past what the tolerance and a step of rounding allow. */
function stepsOf(need: bigint, { held, floor, ceiling }: Part, unit: bigint): Need {
  const least = ceilDivide(floor - held, unit);
  const most = (ceiling - held) / unit;
  const lower = maximum(need / unit, least);
  const upper = ceilDivide(need, unit);
  return { need, lower, upper: maximum(lower, upper < most ? upper : most) };
}

interface Part {
  id: string;
  goal: bigint;
  held: bigint;
  /** The least it may come to: what the pot holds, or the lower edge of its tolerance, one step of rounding included. */
  floor: bigint;
  /** The most it may come to, one scale step of rounding included. */
  ceiling: bigint;
}

/**
 * Exact fresh amounts (mg·ppb) that make up `total`: each component at λ of its goal or at its floor, whichever is
 * more; λ takes up what is over, or missing, elsewhere.
 */
function exactNeeds(pot: Pot, parts: readonly Part[], total: bigint): bigint[] | undefined {
  let room = total;
  for (const [id, held] of pot.contents) if (!pot.target.has(id)) room -= held;
  const fixed = new Set(parts.flatMap((part, n) => (pot.settled?.has(part.id) ? [n] : [])));
  const levels = waterLevels(parts, room, fixed);
  if (levels === undefined || parts.some((part, n) => (levels[n] as bigint) > part.ceiling)) return undefined;
  return parts.map((part, n) => (levels[n] as bigint) - part.held);
}

function partsOf(pot: Pot, total: bigint): Part[] {
  return [...pot.target].map(([id, share]) => partOf(pot, total, id, share));
}

function partOf(pot: Pot, total: bigint, id: string, share: number): Part {
  const step = BigInt(pot.readability) * PPB;
  const tolerance = BigInt(pot.tolerance.get(id) ?? 0);
  const goal = (total * BigInt(share)) / PPB;
  const slack = (total * tolerance) / PPB;
  const held = pot.contents.get(id) ?? 0n;
  const atLeast = held + BigInt(pot.least?.get(id) ?? 0) * PPB;
  const floor = pot.settled?.has(id) ? held : maximum(atLeast, goal - slack - step);
  return { id, goal, held, floor, ceiling: goal + slack + step };
}

function maximum(a: bigint, b: bigint): bigint {
  return a > b ? a : b;
}

/** Levels max(floor, λ·goal) that add up to `room`; a component that stands above λ·goal is fixed at its floor. */
function waterLevels(parts: readonly Part[], room: bigint, fixed: Set<number>): bigint[] | undefined {
  for (;;) {
    const free = parts.reduce((left, part, n) => (fixed.has(n) ? left - part.floor : left), room);
    const goals = parts.reduce((sum, part, n) => (fixed.has(n) ? sum : sum + part.goal), 0n);
    if (free < 0n) return undefined;
    const above = parts.findIndex((part, n) => !fixed.has(n) && part.floor * goals > part.goal * free);
    if (above !== -1) {
      fixed.add(above);
      continue;
    }
    if (goals === 0n) return free === 0n ? parts.map((part) => part.floor) : undefined;
    return spread(parts, fixed, free, goals);
  }
}

/** λ·goal for the free ones; the largest of them takes what the whole division loses. */
function spread(parts: readonly Part[], fixed: ReadonlySet<number>, free: bigint, goals: bigint): bigint[] {
  const levels = parts.map((part, n) => (fixed.has(n) ? part.floor : (part.goal * free) / goals));
  const given = levels.reduce((sum, level, n) => (fixed.has(n) ? sum : sum + level), 0n);
  let largest = -1;
  parts.forEach((part, n) => {
    if (!fixed.has(n) && (largest === -1 || part.goal > (parts[largest] as Part).goal)) largest = n;
  });
  levels[largest] = (levels[largest] as bigint) + free - given;
  return levels;
}
