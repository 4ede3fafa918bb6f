import { ceilDivide } from './least-error.ts';
import type { Milligrams, PartsPerBillion } from './mass.ts';
import { minMaxSteps } from './min-max-steps.ts';
import { nearSteps } from './near-steps.ts';
import { PPB, type RepairPot } from './repair-pot.ts';
import { waterLevels } from './water-levels.ts';

/** What fills a pot up; the worst deviation is the greatest distance of a share from its target, rounded up. */
export interface Filled {
  /** mg of each component that gets some. */
  additions: ReadonlyMap<string, Milligrams>;
  worstDeviation: PartsPerBillion;
}

/**
 * Fresh ink on the scale's steps that fills the pot up to `total` mg, each component as near to its target as the others
 * let it; the need of each is rounded down or up, so that the worst relative error is least. Found in doubles, else
 * exactly; verified exactly.
 * @param total mg, whole steps above what lies in the pot, which it can become (`canBecome`)
 */
export function fillRepair(pot: RepairPot, total: bigint, step: bigint): Filled | undefined {
  const near = nearSteps(pot, total, step);
  const found = near && checked(pot, total, step, near);
  if (found !== undefined) return found;
  const exact = exactSteps(pot, total, step)?.map(Number);
  return exact && checked(pot, total, step, exact);
}

function exactSteps(pot: RepairPot, total: bigint, step: bigint): readonly bigint[] | undefined {
  const unit = total * pot.scale;
  const basins = pot.parts.map(({ held, share, lower, upper }) => {
    const floor = held > unit * lower ? held : unit * lower;
    return { goal: unit * share, floor, ceiling: share === 0n ? held : unit * upper };
  });
  const levels = waterLevels(basins, unit * PPB);
  if (levels === undefined) return undefined;
  const denominator = step * PPB * pot.scale;
  const needs = levels.map((level, n) => {
    const need = level - (pot.parts[n]?.held ?? 0n);
    const lower = need / denominator;
    return { need, lower, upper: need % denominator === 0n ? lower : lower + 1n };
  });
  return minMaxSteps(needs, denominator, (total - pot.mass) / step)?.steps;
}

/** As in core mathematics A: within the tolerance and a step, a foreign component within its own; else undefined. */
function checked(pot: RepairPot, total: bigint, step: bigint, steps: readonly number[]): Filled | undefined {
  const [unit, one] = [total * pot.scale, step * PPB * pot.scale];
  const additions = new Map<string, Milligrams>();
  let [sum, worst] = [0, 0n];
  for (const [n, part] of pot.parts.entries()) {
    const count = steps[n] as number;
    const end = count === 0 ? part.held : part.held + BigInt(count) * one;
    const off = end > unit * part.share ? end - unit * part.share : unit * part.share - end;
    const most = part.share === 0n ? (total + step) * pot.scale * part.tolerance : unit * part.tolerance + one;
    if (off > most || (part.share === 0n && count > 0)) return undefined;
    if (off > worst) worst = off;
    if (count > 0) additions.set(part.id, (count * Number(step)) as Milligrams);
    sum += count;
  }
  if (pot.mass + BigInt(sum) * step !== total) return undefined;
  return { additions, worstDeviation: Number(ceilDivide(worst, unit)) as PartsPerBillion };
}
