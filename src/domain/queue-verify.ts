import type { FoldInPlan } from './fold-in.ts';
import type { QueueProblem } from './plan-queue.ts';

type Verdict = { ok: true } | { ok: false; reasons: readonly string[] };
type Batch = QueueProblem['batches'][number];
type Bucket = QueueProblem['buckets'][number];
const WHOLE = 10n ** 9n;

/**
 * Checks the plans of a queue in exact arithmetic; shares no code with the search. Batches are made in the order of the
 * queue: each finds what the ones before it have left, leaves at least a sliver of what it does not empty, and what is
 * left of a bucket in the end is nothing or at least the greatest sliver that any batch asks for.
 */
export function verifyQueue(problem: QueueProblem, plans: ReadonlyMap<string, FoldInPlan>): Verdict {
  const left = new Map(problem.buckets.map((bucket) => [bucket.id, BigInt(bucket.usable)]));
  const reasons: string[] = [];
  for (const batch of problem.batches) {
    const plan = plans.get(batch.id);
    if (plan === undefined) reasons.push(`Batch ${batch.id} has no plan.`);
    else reasons.push(...[...checkBatch(problem, batch, plan, left)].map((reason) => `Batch ${batch.id}: ${reason}`));
  }
  for (const id of plans.keys())
    if (problem.batches.every((batch) => batch.id !== id)) reasons.push(`Batch ${id} is not in the queue.`);
  reasons.push(...checkLeft(problem, left));
  return reasons.length === 0 ? { ok: true } : { ok: false, reasons };
}

function* checkBatch(
  problem: QueueProblem,
  batch: Batch,
  plan: FoldInPlan,
  left: Map<string, bigint>,
): Generator<string> {
  const known = new Map(problem.buckets.map((bucket) => [bucket.id, bucket]));
  const used = new Set<string>();
  const held = new Map<string, bigint>();
  let reused = 0n;
  for (const from of plan.fromBuckets) {
    const bucket = known.get(from.bucketId);
    if (bucket === undefined || !isAmount(from.mass) || used.has(from.bucketId)) {
      yield `bucket ${from.bucketId} is not on the shelf, stands twice or gives no whole mass.`;
      return;
    }
    used.add(bucket.id);
    if (batch.allowed?.has(bucket.id) === false) yield `bucket ${bucket.id} may not go into it.`;
    yield* take(batch, bucket, from, left);
    reused += BigInt(from.mass);
    for (const [id, ppb] of bucket.composition) add(held, id, BigInt(from.mass) * BigInt(ppb));
  }
  if (used.size > batch.maximumBuckets)
    yield `${used.size} buckets are opened, at most ${batch.maximumBuckets} may be.`;
  if (reused !== BigInt(plan.reused)) yield `the buckets give ${reused} mg, not ${plan.reused} mg.`;
  let total = reused;
  for (const [id, mass] of plan.fresh) {
    if (!isAmount(mass) && (mass as number) !== 0) {
      yield `fresh ${id} is no whole mass.`;
      return;
    }
    total += BigInt(mass);
    add(held, id, BigInt(mass) * WHOLE);
  }
  yield* checkTotal(batch, plan, total);
  yield* checkFresh(batch, plan, total);
  yield* checkShares(batch, held, total);
}

/** Takes it off the shelf. */
function* take(
  batch: Batch,
  { id }: Bucket,
  { mass, empties }: FoldInPlan['fromBuckets'][number],
  left: Map<string, bigint>,
): Generator<string> {
  const before = left.get(id) ?? 0n;
  const after = before - BigInt(mass);
  left.set(id, after);
  if (after < 0n) yield `bucket ${id} has ${before} mg left, not ${mass} mg.`;
  else if (empties !== (after === 0n))
    yield `bucket ${id} is ${after === 0n ? '' : 'not '}emptied, but the plan says otherwise.`;
  else if (empties) return;
  else if (mass % batch.readability !== 0) yield `bucket ${id} gives a mass off the step.`;
  else if (mass < batch.minimumFromBucket) yield `bucket ${id} gives too little.`;
  else if (after < BigInt(batch.sliver)) yield `${after} mg would stay in bucket ${id}: a sliver.`;
}

function* checkTotal(batch: Batch, plan: FoldInPlan, total: bigint): Generator<string> {
  const d = BigInt(batch.readability);
  if (total !== BigInt(plan.batch)) yield `the parts add up to ${total} mg, not to ${plan.batch} mg.`;
  if (total <= BigInt(batch.batch.minimum) - d || total >= BigInt(batch.batch.maximum) + d)
    yield 'it is outside its limits.';
}

function* checkFresh(batch: Batch, plan: FoldInPlan, total: bigint): Generator<string> {
  const d = BigInt(batch.readability);
  for (const [id, mass] of plan.fresh) {
    const share = batch.target.get(id);
    if (mass === 0) continue;
    if (share === undefined) yield `fresh ${id} is not in the formula.`;
    const wanted = (total * BigInt(share ?? 0)) / WHOLE;
    const asked = BigInt(batch.minimumFresh);
    const least = ((asked < wanted ? asked : wanted) / d) * d;
    if (BigInt(mass) % d !== 0n) yield `fresh ${id} is off the step.`;
    if (BigInt(mass) < least) yield `fresh ${id} is too little to weigh.`;
  }
}

function* checkShares(batch: Batch, held: ReadonlyMap<string, bigint>, total: bigint): Generator<string> {
  const d = BigInt(batch.readability);
  for (const id of new Set([...held.keys(), ...batch.target.keys()])) {
    const share = BigInt(batch.target.get(id) ?? 0);
    const tau = BigInt(batch.tolerance.get(id) ?? 0);
    const amount = held.get(id) ?? 0n;
    const off = amount > total * share ? amount - total * share : total * share - amount;
    const isWithin = share === 0n ? amount <= (total + d) * tau : off <= total * tau + d * WHOLE;
    if (!isWithin) yield `component ${id} is outside its tolerance.`;
  }
}

function* checkLeft({ batches, buckets }: QueueProblem, left: ReadonlyMap<string, bigint>): Generator<string> {
  const sliver = batches.reduce((most, batch) => (batch.sliver > most ? batch.sliver : most), 0);
  for (const { id, usable, mustUse } of buckets) {
    const rest = left.get(id) ?? 0n;
    if (rest !== 0n && rest !== BigInt(usable) && rest < BigInt(sliver))
      yield `${rest} mg would stay in bucket ${id}: a sliver.`;
    if (mustUse && rest !== 0n) yield `Bucket ${id} must be used up.`;
  }
}

function isAmount(mass: number): boolean {
  return Number.isSafeInteger(mass) && mass > 0;
}

function add(held: Map<string, bigint>, id: string, amount: bigint): void {
  held.set(id, (held.get(id) ?? 0n) + amount);
}
