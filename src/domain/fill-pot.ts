import type { Composition } from './composition.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { type Need, ceilDivide, minMaxSteps } from './min-max-steps.ts';
import { waterLevels } from './water-levels.ts';

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
 * tolerance and what lies in the pot allow; a step of rounding is let pass beside the tolerance.
 * @param batch mg; where it does not differ from the contents by whole steps, the nearest total below counts
 * @returns undefined when no filling keeps within the tolerances
 */
export function fillPot(pot: Pot, batch: Milligrams): Map<string, Milligrams> | undefined {
  const unit = BigInt(pot.readability) * PPB;
  const held = [...pot.contents.values()].reduce((a, b) => a + b, 0n);
  if (BigInt(batch) * PPB < held) return undefined;
  const steps = (BigInt(batch) * PPB - held) / unit;
  const total = held + steps * unit;
  const parts = [...pot.target].map(([id, share]) => partOf(pot, total, id, share));
  const needs = exactNeeds(pot, parts, total, 0n) ?? exactNeeds(pot, parts, total, unit);
  const found = needs && roundNeeds(needs, parts, unit, steps);
  if (found === undefined) return undefined;
  return new Map(parts.map(({ id }, n) => [id, (Number(found[n]) * pot.readability) as Milligrams] as const));
}

/** What one component holds, should come to, and may come to, mg·ppb. */
interface Part {
  id: string;
  goal: bigint;
  held: bigint;
  /** With the fresh ink that it gets at least. */
  least: bigint;
  lower: bigint;
  upper: bigint;
  settled: boolean;
}

function partOf(pot: Pot, total: bigint, id: string, share: number): Part {
  const goal = (total * BigInt(share)) / PPB;
  const slack = (total * BigInt(pot.tolerance.get(id) ?? 0)) / PPB;
  const held = pot.contents.get(id) ?? 0n;
  const least = held + BigInt(pot.least?.get(id) ?? 0) * PPB;
  return { id, goal, held, least, lower: goal - slack, upper: goal + slack, settled: pot.settled?.has(id) === true };
}

/** Exact fresh amounts that make up `total`, within the tolerances widened by `rounding`. */
function exactNeeds(pot: Pot, parts: readonly Part[], total: bigint, rounding: bigint): bigint[] | undefined {
  const step = BigInt(pot.readability) * PPB;
  let room = total;
  for (const [id, held] of pot.contents) if (!pot.target.has(id)) room -= held;
  if (parts.some((part) => part.least > part.upper + step)) return undefined;
  const basins = parts.map((part) => {
    if (part.settled) return { goal: part.goal, floor: part.held, ceiling: part.held };
    const floor = maximum(part.least, part.lower - rounding);
    return { goal: part.goal, floor, ceiling: maximum(floor, part.upper + rounding) };
  });
  return waterLevels(basins, room)?.map((level, n) => level - (parts[n] as Part).held);
}

/** The step below each need or the one above it; where their sum cannot be, a few more steps off. */
function roundNeeds(
  needs: readonly bigint[],
  parts: readonly Part[],
  unit: bigint,
  steps: bigint,
): readonly bigint[] | undefined {
  const within = (off: bigint) =>
    minMaxSteps(
      needs.map((need, n) => stepsOf(need, parts[n] as Part, unit, off)),
      unit,
      steps,
    );
  return (within(0n) ?? within(BigInt(parts.length)))?.steps;
}

/** Neither past what the tolerance and a step of rounding allow. */
function stepsOf(need: bigint, part: Part, unit: bigint, off: bigint): Need {
  if (part.settled) return { need, lower: 0n, upper: 0n };
  const least = ceilDivide(maximum(part.least, part.lower - unit) - part.held, unit);
  const most = (part.upper + unit - part.held) / unit;
  const lower = maximum(need / unit - off, least);
  const upper = ceilDivide(need, unit) + off;
  return { need, lower, upper: maximum(lower, upper < most ? upper : most) };
}

function maximum(a: bigint, b: bigint): bigint {
  return a > b ? a : b;
}
