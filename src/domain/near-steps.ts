import type { RepairPot } from './repair-pot.ts';

/** Doubles this near to a whole step are taken for it. */
const NEAR = 1e-7;

/**
 * Fresh ink for each part in whole steps, found in doubles: each at λ of its target or at what its tolerance and its
 * content ask for, rounded down or up with the least worst relative error. To be verified exactly by who asks.
 * @param total, step mg @returns undefined where doubles cannot tell
 */
export function nearSteps(pot: RepairPot, total: bigint, step: bigint): number[] | undefined {
  const all = Number(total) / Number(step);
  const unit = Number(step) * 1e9 * Number(pot.scale);
  const held = pot.parts.map((part) => Number(part.held) / unit);
  const goals = pot.parts.map((part) => (all * Number(part.share)) / 1e9);
  const floors = pot.parts.map((part, n) => Math.max(held[n] as number, (all * Number(part.lower)) / 1e9));
  const depth = depthOf(goals, floors, all);
  const needs = goals.map((goal, n) => Math.max(depth * goal, floors[n] as number) - (held[n] as number));
  return roundNeeds(needs, Number((total - pot.mass) / step));
}

/** λ ≤ 1 with Σ max(λ·goal, floor) = all: from above along the slope of this convex sum. */
function depthOf(goals: readonly number[], floors: readonly number[], all: number): number {
  let depth = 1;
  for (let turn = 0; turn <= goals.length; turn++) {
    let room = all;
    let rising = 0;
    goals.forEach((goal, n) => {
      const floor = floors[n] as number;
      if (depth * goal > floor) rising += goal;
      else room -= floor;
    });
    if (rising === 0 || rising * depth <= room) return depth;
    depth = Math.max(0, room / rising);
  }
  return depth;
}

/** One need between two steps, with the relative errors of either. */
interface Between {
  n: number;
  down: number;
  up: number;
}

function roundNeeds(needs: readonly number[], sum: number): number[] | undefined {
  const between: Between[] = [];
  let missing = sum;
  const steps = needs.map((need, n) => {
    const floor = Math.floor(need + NEAR);
    missing -= floor;
    if (need - floor > NEAR) between.push({ n, down: (need - floor) / need, up: (floor + 1 - need) / need });
    return floor;
  });
  if (missing < 0 || missing > between.length) return undefined;
  for (const n of chosenUp(between, missing)) steps[n] = (steps[n] as number) + 1;
  return steps;
}

/** Which are rounded up: all that would be off by more below, then those that are off by least above. */
function chosenUp(between: readonly Between[], missing: number): number[] {
  if (missing === 0) return [];
  const limits = between.flatMap(({ down, up }) => [down, up]).sort((a, b) => a - b);
  let [low, high] = [0, limits.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (fits(between, missing, limits[middle] as number)) high = middle;
    else low = middle + 1;
  }
  const limit = limits[low] as number;
  const rank = ({ down, up }: Between) => (down > limit ? -1 : up);
  return [...between]
    .sort((a, b) => rank(a) - rank(b))
    .slice(0, missing)
    .map(({ n }) => n);
}

function fits(between: readonly Between[], missing: number, limit: number): boolean {
  let must = 0;
  let may = 0;
  for (const { down, up } of between) {
    if (down > limit && up > limit) return false;
    if (down > limit) must++;
    if (up <= limit) may++;
  }
  return must <= missing && missing <= may;
}
