import { questionsOf } from './fold-in-branch.ts';
import type { Change, Fresh } from './fold-in-decisions.ts';
import { type Rounded, roundPlan } from './fold-in-round.ts';
import { NOTHING, Subset } from './fold-in-subset.ts';

const MOST_STEPS = 60;

/** A plan near a relaxation: what is nearest to being decided is decided, again and again; undefined when none above `cutoff` (mg). */
export function planNear(from: Subset, cutoff: number): Rounded | undefined {
  let questions = questionsOf(from);
  if (questions.length === 0) return round(from);
  const [subset, backup] = [new Subset(from), new Subset(from)];
  for (let step = 0; step < MOST_STEPS; step++) {
    const nearest = questions.reduce((a, b) => (certainty(b.nearness) > certainty(a.nearness) ? b : a));
    const ways = nearest.nearness >= 0.5 ? nearest.ways : nearest.ways.toReversed();
    backup.copyFrom(subset);
    if (!ways.some((way) => tryWay(subset, backup, way, cutoff))) return undefined;
    questions = questionsOf(subset);
    if (questions.length === 0) return round(subset);
  }
  return undefined;
}

function tryWay(subset: Subset, backup: Subset, way: Change, cutoff: number): boolean {
  subset.copyFrom(backup);
  subset.change(way);
  return subset.solve(cutoff) === 'optimal' && subset.objective > cutoff;
}

/** Where many are in part, the one that gives most is opened first: the others then go as the count asks. */
function certainty(nearness: number): number {
  return nearness >= 0.5 ? nearness : 0.5 - nearness;
}

/** Components of which there is no fresh ink before rounding get none; where that does not come out, as rounding likes. */
function round(subset: Subset): Rounded | undefined {
  const { search, taken, batch, decisions } = subset;
  const asFound = decisions.fresh.map((fresh, j): Fresh => {
    if (fresh !== 'free' || search.target[j] === 0) return fresh;
    return subset.freshOf(j) < NOTHING ? 'none' : 'free';
  });
  return (
    roundPlan(search, { taken, batch, fresh: asFound }) ?? roundPlan(search, { taken, batch, fresh: decisions.fresh })
  );
}
