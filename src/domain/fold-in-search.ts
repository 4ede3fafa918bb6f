import type { FoldInPlan } from './fold-in.ts';
import { branch } from './fold-in-branch.ts';
import type { Search } from './fold-in-candidates.ts';
import { certify } from './fold-in-certificate.ts';
import { FoldInError } from './fold-in-check.ts';
import { planNear, planWith } from './fold-in-incumbent.ts';
import { Frontier } from './fold-in-frontier.ts';
import { type Relaxed, relax } from './fold-in-relaxation.ts';
import type { Rounded } from './fold-in-round.ts';
import type { Decision, Decisions } from './fold-in-rows.ts';
import type { Milligrams } from './mass.ts';

/** Cells of relaxations after which the best plan is taken with its gap: a second or two of a desk computer. */
const MOST_WORK = 3_000_000;
/** What a relaxation costs beside its cells. */
const NODE_WORK = 1000;
/** Bounds that are taken exactly; where more are tied, the floating one and its margin stand for them. */
const MOST_EXACT = 200;
const YIELD_EVERY = 20;
/** mg: floating-point sums of up to 10⁹ mg err by far less. */
const MARGIN = 1;

type Progress = { plan: FoldInPlan; bound: Milligrams };

/** Best bound first; every plan that is kept verifies exactly, and the bound that is told is computed exactly. */
export function* branchAndBound(search: Search): Generator<Progress, FoldInPlan> {
  const root = relax(search, startOf(search), []);
  let best = better(firstPlan(search, root), planNear(search, root));
  const open = new Frontier();
  open.push(root);
  /** Not worth following, or without a way on: no plan of theirs exceeds their bound. */
  const ended: Relaxed[] = [];
  let work = 0;
  for (let visited = 0; work < MOST_WORK; visited++) {
    const node = open.pop();
    if (node === undefined) break;
    if (node.bound.value <= best.objective + allowance(best, search)) {
      ended.push(node);
      break;
    }
    best = better(best, planNear(search, node));
    const ways = branch(search, withoutHopeless(node, best));
    if (ways.length === 0) ended.push(node);
    for (const way of ways) {
      const child = relax(search, way, node.excesses);
      work += child.cells + NODE_WORK;
      if (child.bound.value > best.objective - MARGIN) open.push(child);
    }
    if (visited % YIELD_EVERY === YIELD_EVERY - 1) {
      const plan = describe(search, best, floatingBound([...open.nodes, ...ended]));
      yield { plan, bound: plan.objectiveBound };
    }
  }
  return describe(search, best, exactBound(search, [...open.nodes, ...ended]));
}

function startOf(search: Search): Decisions {
  return {
    buckets: search.candidates.map((candidate): Decision => (candidate.mustUse ? 'emptied' : 'free')),
    fresh: search.components.map(() => 'free'),
  };
}

/** Without any bucket but those that must be used. @throws FoldInError when not even that can be weighed */
function firstPlan(search: Search, root: Relaxed): Rounded {
  const buckets = search.candidates.map((candidate): Decision => (candidate.mustUse ? 'emptied' : 'closed'));
  const plan = planWith(search, { ...root.certificate.decisions, buckets }, []) ?? planNear(search, root);
  if (plan !== undefined) return plan;
  if (buckets.includes('emptied')) throw new FoldInError('That tub cannot be emptied into this batch.');
  throw new FoldInError('This batch cannot be weighed on this scale.');
}

/** Closes the candidates that cannot be part of a plan better than the best one: their score shows it. */
function withoutHopeless(node: Relaxed, best: Rounded): Relaxed {
  const { value, scores, counted } = node.bound;
  const { decisions } = node.certificate;
  const buckets = decisions.buckets.map((decision, n): Decision => {
    if (decision !== 'free' || (node.taken[n] as number) > 0) return decision;
    const opened = value - counted + Math.min(counted, scores[n] as number);
    return opened < best.objective - MARGIN ? 'closed' : 'free';
  });
  return { ...node, certificate: { ...node.certificate, decisions: { ...decisions, buckets } } };
}

function better(best: Rounded, found: Rounded | undefined): Rounded {
  return found !== undefined && found.objective > best.objective ? found : best;
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

function floatingBound(frontier: readonly Relaxed[]): number {
  return Math.ceil(frontier.reduce((most, { bound }) => Math.max(most, bound.value), -Infinity)) + MARGIN;
}

/** The greatest exact bound; those that are floating-point far below it cannot be it. */
function exactBound(search: Search, frontier: readonly Relaxed[]): number {
  const highest = floatingBound(frontier);
  const near = frontier.filter(({ bound }) => bound.value > highest - 4 * MARGIN);
  if (near.length > MOST_EXACT) return highest;
  return near.reduce((most, node) => Math.max(most, certify(search, node.certificate)), -Infinity);
}
