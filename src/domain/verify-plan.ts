import type { FoldInPlan, FoldInProblem } from './fold-in.ts';

/**
 * Checks a plan in exact arithmetic by the conditions of core mathematics A; shares no code with the search.
 * S = Σ from buckets + Σ fresh; C_j = Σ mass·ppb + fresh·10⁹.
 */
export function verifyPlan(
  problem: FoldInProblem,
  plan: FoldInPlan,
): { ok: true } | { ok: false; reasons: readonly string[] } {
  const reasons = [
    ...checkBuckets(problem, plan),
    ...checkSum(problem, plan),
    ...checkShares(problem, plan),
    ...checkFresh(problem, plan),
  ];
  return reasons.length === 0 ? { ok: true } : { ok: false, reasons };
}

function* checkBuckets(problem: FoldInProblem, plan: FoldInPlan): Generator<string> {
  const d = problem.readability;
  const used = new Map(plan.fromBuckets.map((from) => [from.bucketId, from]));
  if (used.size !== plan.fromBuckets.length) yield 'A bucket is used twice.';
  if (used.size > problem.maximumBuckets)
    yield `${used.size} buckets are opened, at most ${problem.maximumBuckets} may be.`;
  const known = new Map(problem.buckets.map((bucket) => [bucket.id, bucket]));
  for (const { bucketId, mass, empties } of plan.fromBuckets) {
    const bucket = known.get(bucketId);
    if (bucket === undefined) yield `Bucket ${bucketId} is not in the problem.`;
    else if (!Number.isSafeInteger(mass) || mass <= 0) yield `Bucket ${bucketId} gives no whole mass.`;
    else if (empties ? mass !== bucket.usable : mass % d !== 0) yield `Bucket ${bucketId} gives a mass off the step.`;
    else if (!empties && (mass < problem.minimumFromBucket || mass > bucket.usable - problem.sliver)) {
      yield `Bucket ${bucketId} gives too little or leaves a sliver.`;
    }
  }
  for (const bucket of problem.buckets) {
    if (bucket.mustUse && used.get(bucket.id)?.empties !== true) yield `Bucket ${bucket.id} must be used up.`;
  }
}

function* checkSum(problem: FoldInProblem, plan: FoldInPlan): Generator<string> {
  const total = sumOf(plan);
  const d = BigInt(problem.readability);
  if (total !== BigInt(plan.batch)) yield `The parts add up to ${total} mg, not to ${plan.batch} mg.`;
  if (total <= BigInt(problem.batch.minimum) - d || total >= BigInt(problem.batch.maximum) + d)
    yield 'The batch is outside its limits.';
  const reused = plan.fromBuckets.reduce((sum, from) => sum + BigInt(from.mass), 0n);
  if (reused !== BigInt(plan.reused)) yield `The buckets give ${reused} mg, not ${plan.reused} mg.`;
}

function* checkShares(problem: FoldInProblem, plan: FoldInPlan): Generator<string> {
  const total = sumOf(plan);
  const billion = 10n ** 9n;
  const d = BigInt(problem.readability);
  const held = new Map<string, bigint>();
  const add = (id: string, amount: bigint) => held.set(id, (held.get(id) ?? 0n) + amount);
  for (const from of plan.fromBuckets) {
    const bucket = problem.buckets.find((entry) => entry.id === from.bucketId);
    for (const [id, ppb] of bucket?.composition ?? []) add(id, BigInt(from.mass) * BigInt(ppb));
  }
  for (const [id, mass] of plan.fresh) add(id, BigInt(mass) * billion);
  for (const id of new Set([...held.keys(), ...problem.target.keys()])) {
    const share = BigInt(problem.target.get(id) ?? 0);
    const tau = BigInt(problem.tolerance.get(id) ?? 0);
    const amount = held.get(id) ?? 0n;
    const off = amount - total * share;
    if (share === 0n ? amount > (total + d) * tau : (off < 0n ? -off : off) > total * tau + d * billion) {
      yield `Component ${id} is outside its tolerance.`;
    }
  }
}

function* checkFresh(problem: FoldInProblem, plan: FoldInPlan): Generator<string> {
  const total = Number(sumOf(plan));
  const d = problem.readability;
  for (const [id, mass] of plan.fresh) {
    const share = problem.target.get(id) ?? 0;
    const wanted = Number((BigInt(total) * BigInt(share)) / 10n ** 9n);
    const least = Math.floor(Math.min(problem.minimumFresh, wanted) / d) * d;
    if (!Number.isSafeInteger(mass) || mass < 0 || mass % d !== 0) yield `Fresh ${id} is off the step.`;
    else if (mass !== 0 && mass < least) yield `Fresh ${id} is too little to weigh.`;
    if (share === 0 && mass !== 0) yield `Fresh ${id} is not in the formula.`;
  }
}

function sumOf(plan: FoldInPlan): bigint {
  const fresh = [...plan.fresh.values()].reduce((sum, mass) => sum + BigInt(mass), 0n);
  return plan.fromBuckets.reduce((sum, from) => sum + BigInt(from.mass), fresh);
}
