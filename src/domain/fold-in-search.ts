import type { FoldInPlan } from './fold-in.ts';
import { FoldInError } from './fold-in-check.ts';
import type { Decision, Search } from './fold-in-node.ts';
import { type Relaxed, relax } from './fold-in-relaxation.ts';
import { type Rounded, leastFresh, roundPlan } from './fold-in-round.ts';
import type { Milligrams } from './mass.ts';

interface Node {
  decisions: readonly Decision[];
  relaxed: Relaxed;
}

const MOST_NODES = 3000;
const YIELD_EVERY = 25;

/** Best bound first over {closed, partial, emptied} of each candidate; every plan that is kept verifies exactly. */
export function* branchAndBound(search: Search): Generator<{ plan: FoldInPlan; bound: Milligrams }, FoldInPlan> {
  const none = new Float64Array(search.target.length);
  const start = search.candidates.map((candidate): Decision => (candidate.mustUse ? 'emptied' : 'free'));
  const root = search.impossible ? undefined : relax(search, start, none);
  let best = freshOnly(search, root === undefined && search.candidates.some((candidate) => candidate.mustUse));
  const open: Node[] = root === undefined ? [] : [{ decisions: start, relaxed: root }];
  let settled = best.objective as number;
  for (let visited = 0; open.length > 0 && visited < MOST_NODES; visited++) {
    const node = takeBest(open);
    if (!isWorth(node.relaxed.bound, best, search)) {
      settled = Math.max(settled, node.relaxed.bound);
      open.length = 0;
      break;
    }
    best = better(best, incumbent(search, node));
    const at = undecided(search, node);
    if (at === -1) settled = Math.max(settled, node.relaxed.bound);
    else open.push(...children(search, node, at, none));
    if (visited % YIELD_EVERY === YIELD_EVERY - 1) {
      const bound = Math.max(settled, ...open.map((entry) => entry.relaxed.bound));
      yield { plan: describe(search, best, bound), bound: Math.floor(bound) as Milligrams };
    }
  }
  return describe(search, best, Math.max(settled, ...open.map((entry) => entry.relaxed.bound)));
}

function takeBest(open: Node[]): Node {
  let at = 0;
  open.forEach((node, n) => {
    if (node.relaxed.bound > (open[at] as Node).relaxed.bound) at = n;
  });
  return open.splice(at, 1)[0] as Node;
}

/** Rounding to the step costs up to a step for each bucket: less than that is no better plan. */
function isWorth(bound: number, best: Rounded, search: Search): boolean {
  return bound > best.objective + search.problem.readability * (best.fromBuckets.length + 1);
}

/** A candidate that the relaxation takes partly; the most undecided one first. */
function undecided(search: Search, node: Node): number {
  let at = -1;
  let most = 1e-6;
  search.candidates.forEach((candidate, n) => {
    if (node.decisions[n] !== 'free') return;
    const upper = candidate.canEmpty ? candidate.usable : candidate.most;
    const part = (node.relaxed.taken[n] as number) / upper;
    const open = Math.min(part, 1 - part);
    if (open > most) {
      most = open;
      at = n;
    }
  });
  return at;
}

function children(search: Search, node: Node, at: number, none: Float64Array): Node[] {
  const candidate = search.candidates[at];
  if (candidate === undefined) return [];
  const ways: Decision[] = ['closed'];
  if (candidate.canEmpty) ways.push('emptied');
  if (candidate.most >= search.minimum) ways.push('partial');
  return ways.flatMap((way) => {
    const decisions = node.decisions.map((decision, n) => (n === at ? way : decision));
    const relaxed = relax(search, decisions, none);
    return relaxed === undefined ? [] : [{ decisions, relaxed }];
  });
}

/** A plan near the node's relaxation: the buckets it takes most of, re-optimised as opened, then rounded. */
function incumbent(search: Search, node: Node): Rounded | undefined {
  const { taken } = node.relaxed;
  const order = [...taken.keys()].filter((n) => (taken[n] as number) > 1);
  order.sort(
    (a, b) => Number(isFixed(node, b)) - Number(isFixed(node, a)) || (taken[b] as number) - (taken[a] as number),
  );
  const kept = new Set(order.slice(0, search.problem.maximumBuckets));
  const decisions = search.candidates.map((candidate, n): Decision => {
    if (!kept.has(n)) return candidate.mustUse ? 'emptied' : 'closed';
    if (node.decisions[n] === 'emptied' || node.decisions[n] === 'partial') return node.decisions[n] as Decision;
    return candidate.canEmpty && (taken[n] as number) >= candidate.usable - 1
      ? 'emptied'
      : candidate.most >= search.minimum
        ? 'partial'
        : 'closed';
  });
  return plannedWith(search, decisions);
}

function isFixed(node: Node, n: number): boolean {
  return node.decisions[n] !== 'free';
}

/** Optimised under fixed decisions; where too little fresh ink would be left of something, once more with that kept. */
function plannedWith(search: Search, decisions: readonly Decision[]): Rounded | undefined {
  const reserve = new Float64Array(search.target.length);
  for (let tries = 0; tries <= search.components.length; tries++) {
    const relaxed = relax(search, decisions, reserve);
    if (relaxed === undefined) return undefined;
    const rounded = roundPlan(search, relaxed.taken, relaxed.batch);
    if ('plan' in rounded) return rounded.plan;
    if (rounded.tooLittle.length === 0) return undefined;
    for (const j of rounded.tooLittle) reserve[j] = leastFresh(search, j, relaxed.batch) + search.problem.readability;
  }
  return undefined;
}

function freshOnly(search: Search, mustFail: boolean): Rounded {
  const closed = search.candidates.map((): Decision => 'closed');
  const plan = plannedWith(
    { ...search, problem: { ...search.problem, buckets: search.problem.buckets.map(withoutMust) } },
    closed,
  );
  if (plan === undefined || mustFail)
    throw new FoldInError(
      mustFail ? 'That tub cannot be emptied into this batch.' : 'This batch cannot be weighed on this scale.',
    );
  return plan;
}

function withoutMust(bucket: Search['problem']['buckets'][number]): Search['problem']['buckets'][number] {
  return { ...bucket, mustUse: false };
}

function better(best: Rounded, found: Rounded | undefined): Rounded {
  return found !== undefined && found.objective > best.objective ? found : best;
}

function describe(search: Search, best: Rounded, bound: number): FoldInPlan {
  const objectiveBound = Math.max(best.objective, Math.floor(bound)) as Milligrams;
  const rounding = search.problem.readability * (best.fromBuckets.length + 1);
  const proven = objectiveBound - best.objective <= Math.abs(best.objective) * 1e-6 + rounding;
  const status = best.fromBuckets.length === 0 ? 'none' : proven ? 'best' : 'gap';
  return { status, ...best, objectiveBound, excluded: search.excluded };
}
