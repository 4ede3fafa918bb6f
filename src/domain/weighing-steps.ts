import type { Composition } from './composition.ts';
import { type Contents, type Pot, type Tolerance, contentsOf, fillPot } from './fill-pot.ts';
import { fillFrom } from './fill-from.ts';
import { leastBatch } from './least-batch.ts';
import { type Milligrams, WHOLE } from './mass.ts';

const PPB = BigInt(WHOLE);

/** One thing still to be put into the pot; `planned` in mg. */
export type WeighingStep =
  | { kind: 'component'; componentId: string; planned: Milligrams }
  | { kind: 'bucket'; bucketId: string; composition: Composition; planned: Milligrams; empties: boolean };

interface Weighable {
  fromBuckets: readonly { bucketId: string; mass: Milligrams; empties: boolean }[];
  fresh: ReadonlyMap<string, Milligrams>;
}

/** Leftovers first, then fresh ink in `order`; what weighs nothing is no step. */
export function planSteps(
  plan: Weighable,
  order: readonly string[],
  compositions: ReadonlyMap<string, Composition>,
): WeighingStep[] {
  const leftovers = plan.fromBuckets.map((from): WeighingStep => {
    const composition = compositions.get(from.bucketId);
    if (composition === undefined) throw new Error('The plan names a bucket without a composition.');
    return { kind: 'bucket', bucketId: from.bucketId, composition, planned: from.mass, empties: from.empties };
  });
  return [...leftovers, ...freshSteps(plan.fresh, order)];
}

interface Replan {
  target: Composition;
  /** mg, what was asked for. */
  planned: Milligrams;
  contents: readonly { composition: Composition; mass: Milligrams }[];
  remaining: readonly WeighingStep[];
  tolerance: Tolerance;
  readability: Milligrams;
}

/**
 * What is still to be weighed so that the batch ends on target at the greater of what was asked for and the least that
 * the pot can become. Leftovers that wait keep their mass; a component that was weighed and now needs more comes again.
 * Where the pot cannot be brought back, fresh steps keep their planned mass: the screen offers no way on but out.
 */
export function replanSteps(input: Replan): { batch: Milligrams; steps: WeighingStep[] } {
  const leftovers = input.remaining.filter((step) => step.kind === 'bucket');
  const order = input.remaining.flatMap((step) => (step.kind === 'component' ? [step.componentId] : []));
  const contents = contentsOf([
    ...input.contents,
    ...leftovers.map((step) => ({ composition: step.composition, mass: step.planned })),
  ]);
  const pot: Pot = { target: input.target, tolerance: input.tolerance, contents, readability: input.readability };
  const held = massOf(contents);
  const least = leastBatch(pot.target, pot.tolerance, contents, pot.readability) ?? held;
  const asked = onStep(Math.max(input.planned, least), held, input.readability);
  const settled = settledComponents(pot, order, asked);
  if (order.length === 0 && settled.size === input.target.size) return { batch: held, steps: leftovers };
  const batch = onStep(Math.max(least, settledBatch(pot, settled, asked)), held, input.readability);
  const fresh = fillPot({ ...pot, settled }, batch) ?? fillFrom(pot, held, asked)?.additions;
  if (fresh === undefined) return { batch: asked, steps: [...input.remaining] };
  const total = held + [...fresh.values()].reduce((sum, mass) => sum + mass, 0);
  return { batch: total as Milligrams, steps: [...leftovers, ...freshSteps(fresh, order)] };
}

/** Components that were weighed, or that the leftovers bring, and that are not short of their tolerance. */
function settledComponents(pot: Pot, order: readonly string[], batch: Milligrams): Set<string> {
  const settled = new Set<string>();
  for (const [id, share] of pot.target) {
    if (order.includes(id)) continue;
    const edge = BigInt(batch) * BigInt(share - Math.min(share, pot.tolerance.get(id) ?? 0));
    if ((pot.contents.get(id) ?? 0n) + BigInt(pot.readability) * PPB >= edge) settled.add(id);
  }
  return settled;
}

/** Where the settled ones are short together, the batch of which they are their whole share; else the one asked for. */
function settledBatch(pot: Pot, settled: ReadonlySet<string>, asked: Milligrams): Milligrams {
  let held = 0n;
  let shares = 0n;
  for (const [id, amount] of pot.contents) {
    if (settled.has(id) || !pot.target.has(id)) held += amount;
  }
  for (const id of settled) shares += BigInt(pot.target.get(id) ?? 0);
  if (shares === 0n || held >= BigInt(asked) * shares) return asked;
  return Number(held / shares) as Milligrams;
}

/** The next batch at or above `mass` that differs from what is in the pot by whole steps. */
function onStep(mass: number, held: Milligrams, readability: Milligrams): Milligrams {
  return (held + Math.max(0, Math.ceil((mass - held) / readability)) * readability) as Milligrams;
}

function massOf(contents: Contents): Milligrams {
  return Number([...contents.values()].reduce((a, b) => a + b, 0n) / PPB) as Milligrams;
}

function freshSteps(fresh: ReadonlyMap<string, Milligrams>, order: readonly string[]): WeighingStep[] {
  const position = (id: string) => (order.includes(id) ? order.indexOf(id) : order.length);
  return [...fresh]
    .filter(([, planned]) => planned > 0)
    .sort(([a], [b]) => position(a) - position(b))
    .map(([componentId, planned]) => ({ kind: 'component', componentId, planned }));
}
