import type { Candidate } from './fold-in-candidates.ts';
import { type Change, type Decision, leastFreshOf, limitsOf, mostOf } from './fold-in-decisions.ts';
import type { Certificate } from './fold-in-bound.ts';
import { WHOLE } from './mass.ts';
import { NOTHING, type Node, type Subset, nodeOf } from './fold-in-subset.ts';

/** What keeps a relaxation from being a plan, and the ways to decide it: of a bucket or of a component's fresh ink. */
export interface Question {
  ways: readonly Change[];
  /** 0 to 1: how near the relaxation is to the first way of the list. */
  nearness: number;
  /** mg that are at stake. */
  weight: number;
}

/** None when the relaxation is a plan, before rounding to the scale's steps. */
export function questionsOf(subset: Subset): Question[] {
  const { search, decisions } = subset;
  const { taken } = subset;
  const questions: Question[] = [];
  const countsInPart = search.problem.worthOpening > 0 || !fitsCount(subset, taken);
  search.candidates.forEach((candidate, i) => {
    const mass = taken[i] as number;
    const decision = decisions.buckets[i] as Decision;
    if (decision === 'free' && mass > NOTHING) {
      const open = limitsOf(candidate, 'open', search.minimum);
      const isInPart = countsInPart && mass < mostOf(candidate) - NOTHING;
      if (!isInPart && mass >= open.least - NOTHING && !isInGap(candidate, mass)) return;
      const nearness = mass / mostOf(candidate);
      const weight = Math.min(mass, mostOf(candidate) - mass) + NOTHING;
      questions.push({ ways: [opening(candidate, i), { bucket: i, to: 'closed' }], nearness, weight });
    } else if (decision === 'open' && isInGap(candidate, mass)) {
      const ways = (['emptied', 'partial'] as const).map((to) => ({ bucket: i, to }));
      questions.push({ ways, nearness: 0.5, weight: candidate.usable - mass });
    }
  });
  search.components.forEach((_, j) => {
    if (search.target[j] === 0 || decisions.fresh[j] === 'none') return;
    const mass = subset.freshOf(j);
    if (mass < NOTHING) return;
    const least = leastFreshOf(search, j, decisions);
    if (decisions.fresh[j] === 'some' || mass > least - NOTHING) {
      if (subset.relaxation.isRanged && isTooLittle(subset, j, mass)) questions.push(...halved(subset, j));
      return;
    }
    const ways = (['some', 'none'] as const).map((to) => ({ component: j, to }));
    // Little ink, but it decides about whole buckets.
    questions.push({ ways, nearness: mass / least, weight: search.greatest });
  });
  return questions;
}

/** Less than can be weighed of this batch, though not of the least one. */
function isTooLittle({ search, batch }: Subset, j: number, mass: number): boolean {
  const least = leastFreshOf(search, j, { batch: { least: batch, greatest: batch } });
  const ofOneStep = (search.problem.readability * (search.target[j] as number)) / WHOLE;
  return mass < least - ofOneStep - NOTHING;
}

/** The range in two, where m = M·t_j, or else in its middle. */
function halved({ search, decisions }: Subset, j: number): Question[] {
  const { least, greatest } = decisions.batch;
  const d = search.problem.readability;
  const turn = (search.problem.minimumFresh * WHOLE) / (search.target[j] as number);
  const middle = turn > least + d && turn < greatest - d ? turn : (least + greatest) / 2;
  const at = Math.floor(middle / d) * d;
  if (at <= least || at >= greatest) return [];
  const ways = [
    { least: at, greatest },
    { least, greatest: at },
  ].map((batch) => ({ batch }));
  return [{ ways, nearness: 0.5, weight: search.greatest }];
}

function opening(candidate: Candidate, i: number): Change {
  return { bucket: i, to: candidate.canEmpty && candidate.most <= 0 ? 'emptied' : 'open' };
}

function fitsCount(subset: Subset, taken: Float64Array): boolean {
  let opened = 0;
  for (const mass of taken) if (mass > NOTHING) opened += 1;
  return opened <= subset.search.problem.maximumBuckets;
}

/** What would be left is too little to keep. */
function isInGap({ canEmpty, most, usable }: Candidate, mass: number): boolean {
  return canEmpty && mass > Math.max(most, 0) + NOTHING && mass < usable - NOTHING;
}

/** Questions of which both answers are tried out before one is chosen. */
export const TRIED = 8;

/**
 * The subsets that follow: of the question whose answers lower the relaxation most.
 * @param cutoff mg: bounds are not sought below it
 */
export function branch(subset: Subset, node: Node, questions: Question[], cutoff: number, scratch: Subset): Node[] {
  questions.sort((a, b) => b.weight - a.weight);
  let chosen: Certificate[] = [];
  let most = -Infinity;
  for (const { ways } of questions.slice(0, TRIED)) {
    let product = 1;
    let open = 0;
    const certificates = ways.map((way) => {
      scratch.copyFrom(subset);
      scratch.change(way);
      const isOpen = scratch.solve(cutoff) === 'optimal' && scratch.objective > cutoff;
      open += Number(isOpen);
      product *= Math.max(NOTHING, subset.objective - (isOpen ? scratch.objective : cutoff));
      return scratch.certificate;
    });
    if (open < 2) product = Infinity;
    if (product <= most) continue;
    most = product;
    chosen = certificates;
    if (open < 2) break;
  }
  return chosen.map((certificate) => nodeOf(subset, certificate, node.depth + 1));
}
