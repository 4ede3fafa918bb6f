import type { FoldInPlan } from './fold-in.ts';
import { branch, questionsOf } from './fold-in-branch.ts';
import type { Search } from './fold-in-candidates.ts';
import { certify } from './fold-in-certificate.ts';
import { FoldInError } from './fold-in-check.ts';
import { type Decision, startOf } from './fold-in-decisions.ts';
import { planNear } from './fold-in-dive.ts';
import { Frontier } from './fold-in-frontier.ts';
import { relaxationOf } from './fold-in-program.ts';
import type { Rounded } from './fold-in-round.ts';
import { type Node, Subset } from './fold-in-subset.ts';
import type { Milligrams } from './mass.ts';

/** Nodes after which the best plan is taken with its gap: a second or two of a desk computer. */
const MOST_NODES = 4000;
/** Bounds that are taken exactly; where more are tied, the floating one and its margin stand for them. */
const MOST_EXACT = 200;
const YIELD_EVERY = 10;
/** A plan is sought near each node of so many. */
const DIVE_EVERY = 6;
/** mg: floating-point sums of up to 10⁹ mg err by far less. */
const MARGIN = 1;

type Progress = { plan: FoldInPlan; bound: Milligrams };

/** Best bound first; every plan that is kept verifies exactly, and the bound that is told is computed exactly. */
export function* branchAndBound(whole: Search): Generator<Progress, FoldInPlan> {
  const first = firstPlan(whole);
  const all = rootOf(whole);
  let best = better(first, planNear(all, enough(first, whole), new Subset(all), new Subset(all)));
  const search = { ...whole, candidates: whole.candidates.filter((_, i) => !isHopeless(all.node, i, best)) };
  const root = rootOf(search);
  const [subset, scratch, backup] = [new Subset(root), new Subset(root), new Subset(root)];
  const open = new Frontier();
  open.push(root.node);
  /** Not worth following, or without a way on: no plan of theirs exceeds their bound. */
  const ended: Node[] = [];
  for (let visited = 0; visited < MOST_NODES; visited++) {
    const node = open.pop();
    if (node === undefined) break;
    if (node.bound.value <= enough(best, whole)) {
      ended.push(node);
      break;
    }
    subset.copyFrom(root);
    subset.decide(withoutHopeless(node, best));
    if (subset.solve(enough(best, whole)) === 'optimal') {
      const questions = questionsOf(subset);
      if (questions.length === 0 || visited % DIVE_EVERY === 0)
        best = better(best, planNear(subset, enough(best, whole), scratch, backup));
      if (questions.length === 0) ended.push(subset.node);
      else
        for (const child of branch(subset, node, questions, enough(best, whole), scratch)) {
          if (child.bound.value > best.objective - MARGIN) open.push(child);
        }
    } else ended.push(lower(node, subset.node));
    if (visited % YIELD_EVERY === YIELD_EVERY - 1) {
      const plan = describe(whole, best, floatingBound([...open.nodes, ...ended]));
      yield { plan, bound: plan.objectiveBound };
    }
  }
  return describe(whole, best, exactBound(root, [...open.nodes, ...ended]));
}

function lower(a: Node, b: Node): Node {
  return b.bound.value < a.bound.value ? b : a;
}

function rootOf(search: Search): Subset {
  const root = new Subset({ search, relaxation: relaxationOf(search) });
  root.decide(startOf(search));
  root.solve();
  return root;
}

/** Without any bucket but those that must be used. @throws FoldInError when not even that can be weighed */
function firstPlan(whole: Search): Rounded {
  const candidates = whole.candidates.filter((candidate) => candidate.mustUse);
  const without = rootOf({ ...whole, candidates });
  const plan = planNear(without, -Infinity, new Subset(without), new Subset(without));
  if (plan !== undefined) return plan;
  if (candidates.length > 0) throw new FoldInError('That tub cannot be emptied into this batch.');
  throw new FoldInError('This batch cannot be weighed on this scale.');
}

/** A candidate that cannot be part of a plan better than the best one: its score shows it. */
function isHopeless({ bound, certificate }: Node, i: number, best: Rounded): boolean {
  if (certificate.decisions.buckets[i] !== 'free') return false;
  const { value, counted, scores } = bound;
  return value - counted + Math.min(counted, scores[i] as number) < best.objective - MARGIN;
}

function withoutHopeless(node: Node, best: Rounded): Node['certificate']['decisions'] {
  const { buckets, fresh } = node.certificate.decisions;
  return { buckets: buckets.map((to, i): Decision => (isHopeless(node, i, best) ? 'closed' : to)), fresh };
}

function better(best: Rounded, found: Rounded | undefined): Rounded {
  return found !== undefined && found.objective > best.objective ? found : best;
}

/** mg: an objective that is not worth seeking beyond. */
function enough(best: Rounded, search: Search): number {
  return best.objective + allowance(best, search);
}

/** A bound this near is the same plan: a step for each bucket is lost in rounding, and a millionth is no ink. */
function allowance(best: Rounded, search: Search): number {
  const rounding = search.problem.readability * Math.max(1, best.fromBuckets.length);
  return Math.max(rounding, Math.abs(best.objective) * 1e-6);
}

function describe(search: Search, best: Rounded, bound: number): FoldInPlan {
  const objectiveBound = Math.max(best.objective, bound) as Milligrams;
  const proven = objectiveBound - best.objective <= allowance(best, search) + MARGIN;
  const used = new Set(best.fromBuckets.map((from) => from.bucketId));
  const excluded = search.excluded.filter(({ bucketId }) => !used.has(bucketId));
  return { status: !proven ? 'gap' : used.size === 0 ? 'none' : 'best', ...best, objectiveBound, excluded };
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
