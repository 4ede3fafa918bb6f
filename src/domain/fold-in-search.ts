import type { FoldInPlan } from './fold-in.ts';
import { TRIED, branch, questionsOf } from './fold-in-branch.ts';
import type { Search } from './fold-in-candidates.ts';
import { certify } from './fold-in-certificate.ts';
import type { Decision } from './fold-in-decisions.ts';
import { planNear } from './fold-in-dive.ts';
import { Frontier } from './fold-in-frontier.ts';
import { Incumbent } from './fold-in-incumbent.ts';
import { type Node, Subset, nodeOf, rootOf } from './fold-in-subset.ts';
import type { Milligrams } from './mass.ts';

/** Cells of tableaus after which the best plan is taken with its gap: a second or two of a desk computer. */
const MOST_WORK = 60_000_000;
/** …and after which the caller is told how far it is. */
const YIELD_WORK = 500_000;
/** Bounds that are taken exactly; where more are tied, the floating one and its margin stand for them. */
const MOST_EXACT = 200;
/** A plan is sought near each node of so many. */
const DIVE_EVERY = 6;
/** mg: floating-point sums of up to 10⁹ mg err by far less. */
const MARGIN = 1;

type Progress = { plan: FoldInPlan; bound: Milligrams };

/** Best bound first; every plan that is kept verifies exactly, and the bound that is told is computed exactly. */
export function* branchAndBound(whole: Search): Generator<Progress, FoldInPlan> {
  const all = rootOf(whole);
  const best = new Incumbent(whole);
  best.offer(planNear(all, best.enough));
  best.offerSingles();
  const root = withoutHopelessCandidates(all, best);
  let subset: Subset | undefined;
  let scratch: Subset | undefined;
  const open = new Frontier();
  open.push(nodeOf(root, root.certificate, 0));
  /** Not worth following, or without a way on: no plan of theirs exceeds their bound. */
  const ended: Node[] = [];
  let work = 0;
  let told = 0;
  for (let visited = 0; work < MOST_WORK; visited++) {
    const node = open.pop();
    if (node === undefined) break;
    if (node.bound.value <= best.enough) {
      ended.push(node);
      break;
    }
    subset = renewed(subset, root);
    subset.decide(withoutHopeless(node, best));
    const isOpen = subset.solve(best.enough) === 'optimal';
    const questions = isOpen ? questionsOf(subset) : [];
    const isDive = questions.length === 0 || !best.isThere || visited % DIVE_EVERY === DIVE_EVERY - 1;
    if (isOpen && isDive) best.offer(planNear(subset, best.enough));
    if (questions.length === 0) ended.push(lower(node, nodeOf(subset, subset.certificate, node.depth)));
    scratch ??= new Subset(root);
    for (const child of branch(subset, node, questions, best.enough, scratch)) {
      if (child.bound.value > best.objective - MARGIN) open.push(child);
    }
    work += root.size * (1 + 2 * Math.min(TRIED, questions.length));
    if (best.isThere && work - told > YIELD_WORK) {
      told = work;
      const plan = best.describe(floatingBound([...open.nodes, ...ended]));
      yield { plan, bound: plan.objectiveBound };
    }
  }
  return best.describe(exactBound(root, [...open.nodes, ...ended]));
}

function renewed(subset: Subset | undefined, from: Subset): Subset {
  if (subset === undefined) return new Subset(from);
  subset.copyFrom(from);
  return subset;
}

function lower(a: Node, b: Node): Node {
  return b.bound.value < a.bound.value ? b : a;
}

/** Where nothing is decided, without the candidates that no better plan uses. */
function withoutHopelessCandidates(all: Subset, best: Incumbent): Subset {
  const node = nodeOf(all, all.certificate, 0);
  const candidates = all.search.candidates.filter((_, i) => !isHopeless(node, i, best));
  return candidates.length === all.search.candidates.length ? all : rootOf({ ...all.search, candidates });
}

/** A candidate that cannot be part of a plan better than the best one: its score shows it. */
function isHopeless({ bound, certificate }: Node, i: number, best: Incumbent): boolean {
  if (certificate.decisions.buckets[i] !== 'free') return false;
  const { value, counted, scores } = bound;
  return value - counted + Math.min(counted, scores[i] as number) < best.objective - MARGIN;
}

function withoutHopeless(node: Node, best: Incumbent): Node['certificate']['decisions'] {
  const { decisions } = node.certificate;
  const buckets = decisions.buckets.map((to, i): Decision => (isHopeless(node, i, best) ? 'closed' : to));
  return { ...decisions, buckets };
}

function floatingBound(frontier: readonly Node[]): number {
  return Math.ceil(frontier.reduce((most, { bound }) => Math.max(most, bound.value), -Infinity)) + MARGIN;
}

/** The greatest exact bound; those that are floating-point far below it cannot be it. */
function exactBound(root: Subset, frontier: readonly Node[]): number {
  const highest = floatingBound(frontier);
  const near = frontier.filter(({ bound }) => bound.value > highest - 4 * MARGIN);
  if (near.length > MOST_EXACT) return highest;
  return near.reduce(
    (most, node) => Math.max(most, certify(root.search, root.relaxation, node.certificate)),
    -Infinity,
  );
}
