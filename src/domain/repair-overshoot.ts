import type { Composition } from './composition.ts';
import { type Contents, type Tolerance, contentsOf, fillPot } from './fill-pot.ts';
import { fillFrom } from './fill-from.ts';
import { leastBatch } from './least-batch.ts';
import { type Milligrams, type PartsPerBillion, WHOLE, requireStep } from './mass.ts';

const PPB = BigInt(WHOLE);

export interface RepairInput {
  target: Composition;
  /** mg, as asked for. */
  planned: Milligrams;
  /** What lies in the pot, the last addition included. */
  contents: readonly { composition: Composition; mass: Milligrams }[];
  /** Still unmixed on top, so that some of it can be taken out again. */
  lastAddition?: { componentId: string; mass: Milligrams };
  tolerance: Tolerance;
  /** mg that the container can hold. */
  capacity: Milligrams;
  readability: Milligrams;
}

export interface RepairChoice {
  kind: 'carry-on' | 'grow' | 'take-back' | 'scoop-out' | 'keep-as-leftover';
  /** mg at the end. */
  batch: Milligrams;
  /** mg taken out of the pot. */
  removed: Milligrams;
  additions: ReadonlyMap<string, Milligrams>;
  worstDeviation: PartsPerBillion;
}

export interface Repair {
  state: 'on-plan' | 'within-tolerance' | 'over' | 'beyond-repair';
  choices: readonly RepairChoice[];
}

/** What can be done about what lies in the pot, least extra ink first (core mathematics C). @throws MassError */
export function repairOvershoot(input: RepairInput): Repair {
  requireStep(input.readability);
  const contents = contentsOf(input.contents);
  const held = massOf(contents);
  const least = leastBatch(input.target, input.tolerance, contents, input.readability);
  const keep = { kind: 'keep-as-leftover', batch: held, removed: 0 as Milligrams, additions: new Map() } as const;
  if (least === undefined) {
    const kept = { ...keep, worstDeviation: deviation(input.target, contents) };
    return { state: 'beyond-repair', choices: [...takenBack(input, contents), kept] };
  }
  if (least <= input.planned) {
    const carryOn = grown(input, contents, held, input.planned, 'carry-on');
    return { state: isOnPlan(input, contents) ? 'on-plan' : 'within-tolerance', choices: carryOn };
  }
  return { state: 'over', choices: [...takenBack(input, contents), ...grown(input, contents, held, least, 'grow')] };
}

function grown(
  input: RepairInput,
  contents: Contents,
  held: Milligrams,
  least: Milligrams,
  kind: 'carry-on' | 'grow',
): RepairChoice[] {
  const filled = fillFrom({ ...input, contents }, held, least);
  if (filled === undefined) return [];
  const { batch, additions } = filled;
  if (batch > input.capacity) return scoopedOut(input, contents, held, batch);
  const worstDeviation = deviation(input.target, withAdditions(contents, additions));
  return [{ kind, batch, removed: 0 as Milligrams, additions, worstDeviation }];
}

/** Once mixed, P(1 − C/M') out, as a labelled leftover, lets the rest grow inside the container. */
function scoopedOut(input: RepairInput, contents: Contents, held: Milligrams, batch: Milligrams): RepairChoice[] {
  const d = input.readability;
  const least = Math.ceil((held * (1 - input.capacity / batch)) / d) * d;
  for (let removed = least; removed < Math.min(held, least + 4 * d); removed += d) {
    const left = BigInt(held - removed);
    const rest = new Map([...contents].map(([id, amount]) => [id, (amount * left) / BigInt(held)]));
    const kept = massOf(rest);
    const goal = (kept + Math.floor((input.capacity - kept) / d) * d) as Milligrams;
    const additions = fillPot({ ...input, contents: rest }, goal);
    if (additions === undefined) continue;
    const worstDeviation = deviation(input.target, withAdditions(rest, additions));
    const total = held - removed + [...additions.values()].reduce((sum, mass) => sum + mass, 0);
    return [
      { kind: 'scoop-out', batch: total as Milligrams, removed: removed as Milligrams, additions, worstDeviation },
    ];
  }
  return [];
}

function withAdditions(contents: Contents, additions: ReadonlyMap<string, Milligrams>): Contents {
  const final = new Map(contents);
  for (const [id, mass] of additions) final.set(id, (final.get(id) ?? 0n) + BigInt(mass) * PPB);
  return final;
}

/** Taking the surplus of the last addition out again, into a labelled cup. */
function takenBack(input: RepairInput, contents: Contents): RepairChoice[] {
  const last = input.lastAddition;
  if (last === undefined) return [];
  const goal = BigInt(input.planned) * BigInt(input.target.get(last.componentId) ?? 0);
  const surplus = (contents.get(last.componentId) ?? 0n) - goal;
  const removed = Math.min(
    last.mass,
    Math.ceil(Number(surplus / PPB) / input.readability) * input.readability,
  ) as Milligrams;
  if (removed <= 0) return [];
  const rest = new Map(contents);
  rest.set(last.componentId, (rest.get(last.componentId) ?? 0n) - BigInt(removed) * PPB);
  const least = leastBatch(input.target, input.tolerance, rest, input.readability);
  if (least === undefined || least > input.planned) return [];
  return grown(input, rest, massOf(rest), input.planned, 'carry-on').map((choice) => ({
    ...choice,
    kind: 'take-back',
    removed,
  }));
}

function isOnPlan(input: RepairInput, contents: Contents): boolean {
  return [...contents].every(([id, amount]) => amount <= BigInt(input.planned) * BigInt(input.target.get(id) ?? 0));
}

/** The greatest distance of a share from its target, ppb, rounded up. */
function deviation(target: Composition, contents: Contents): PartsPerBillion {
  const total = [...contents.values()].reduce((a, b) => a + b, 0n);
  let worst = 0n;
  for (const id of new Set([...target.keys(), ...contents.keys()])) {
    const off = (contents.get(id) ?? 0n) * PPB - total * BigInt(target.get(id) ?? 0);
    const size = off < 0n ? -off : off;
    if (size > worst) worst = size;
  }
  return (total === 0n ? 0 : Number((worst + total - 1n) / total)) as PartsPerBillion;
}

function massOf(contents: Contents): Milligrams {
  return Number([...contents.values()].reduce((a, b) => a + b, 0n) / PPB) as Milligrams;
}
