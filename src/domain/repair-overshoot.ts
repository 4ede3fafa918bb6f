import { type Composition, requireWhole } from './composition.ts';
import { fillRepair } from './fill-repair.ts';
import { ceilDivide } from './least-error.ts';
import { MassError, type Milligrams, type PartsPerBillion, milligrams, partsPerBillion, requireStep } from './mass.ts';
import {
  PPB,
  type RepairPot,
  canBecome,
  leastTotal,
  potOf,
  withoutMixed,
  withoutUnmixed,
  worstDeviation,
} from './repair-pot.ts';

/** A pot that cannot be as it is described. */
export class RepairError extends Error {
  override name = 'RepairError';
}

export interface RepairInput {
  target: Composition;
  /** mg, as asked for. */
  planned: Milligrams;
  /** What lies in the pot, the last addition included. */
  contents: readonly { composition: Composition; mass: Milligrams }[];
  /** Still unmixed on top, so that some of it can be taken out again. */
  lastAddition?: { componentId: string; mass: Milligrams };
  /** ppb of each component, foreign ones included; what is absent is 0. */
  tolerance: ReadonlyMap<string, PartsPerBillion>;
  /** mg that the container can hold. */
  capacity: Milligrams;
  readability: Milligrams;
}

export interface RepairChoice {
  kind: 'carry-on' | 'grow' | 'take-back' | 'scoop-out' | 'keep-as-leftover';
  /** mg at the end. */
  batch: Milligrams;
  /** mg taken out of the pot before the additions. */
  removed: Milligrams;
  /** mg of fresh ink, multiples of the readability. */
  additions: ReadonlyMap<string, Milligrams>;
  /** The greatest distance of a share from its target, rounded up. */
  worstDeviation: PartsPerBillion;
}

export interface Repair {
  state: 'on-plan' | 'within-tolerance' | 'over' | 'beyond-repair';
  choices: readonly RepairChoice[];
}

/**
 * What can be done about what lies in the pot, least extra ink first (core mathematics C): within tolerance when the
 * least final batch is not above what was planned, or, at the end, not above what lies there.
 * @throws MassError, CompositionError, RepairError
 */
export function repairOvershoot(input: RepairInput): Repair {
  const pot = requirePot(input);
  const planned = BigInt(input.planned);
  const total = planned > pot.mass ? planned : pot.mass;
  if (canBecome(pot, total)) {
    const onPlan = pot.parts.every(({ held, share }) => held <= total * share);
    const carryOn = filled(input, 'carry-on', pot);
    return { state: onPlan ? 'on-plan' : 'within-tolerance', choices: orKept(carryOn, pot) };
  }
  const least = leastTotal(pot, planned, BigInt(input.readability));
  const back = takenBack(input, pot, least);
  if (least === undefined) return { state: 'beyond-repair', choices: [...back, kept(pot)] };
  const grown = least <= BigInt(input.capacity) ? filled(input, 'grow', pot, 0n, least) : scoopedOut(input, pot);
  return {
    state: 'over',
    choices: orKept(
      [...back, ...grown].sort((a, b) => newInk(a) - newInk(b)),
      pot,
    ),
  };
}

/** @param total mg, what the pot becomes: the least that it can and that was planned */
function filled(
  input: RepairInput,
  kind: RepairChoice['kind'],
  pot: RepairPot,
  removed = 0n,
  total = leastTotal(pot, BigInt(input.planned), BigInt(input.readability)),
): RepairChoice[] {
  if (total === undefined || total > BigInt(input.capacity)) return [];
  const found = fillRepair(pot, total, BigInt(input.readability));
  if (found === undefined) return [];
  return [{ kind, batch: Number(total) as Milligrams, removed: Number(removed) as Milligrams, ...found }];
}

/** As little of the last addition out again, into a labelled cup, as lets the rest become the least batch it can. */
function takenBack(input: RepairInput, pot: RepairPot, least: bigint | undefined): RepairChoice[] {
  const last = input.lastAddition;
  if (last === undefined || last.mass === 0) return [];
  const step = BigInt(input.readability);
  const unmixed = BigInt(last.mass);
  const total = leastTotal(withoutUnmixed(pot, last.componentId, unmixed), BigInt(input.planned), step);
  if (total === undefined || (least !== undefined && total >= least)) return [];
  const surplus = surplusOf(pot, last.componentId, total);
  const steps = surplus <= 0n ? 0n : ceilDivide(surplus, PPB * step);
  const removed = steps * step < unmixed ? steps * step : unmixed;
  return removed === 0n ? [] : filled(input, 'take-back', withoutUnmixed(pot, last.componentId, removed), removed);
}

/** mg·ppb of one component above its tolerance at `total`, or above what the others leave room for. */
function surplusOf({ parts }: RepairPot, id: string, total: bigint): bigint {
  let room = total * PPB;
  let [held, most] = [0n, 0n];
  for (const part of parts) {
    if (part.id === id) [held, most] = [part.held, total * part.upper];
    else room -= part.held > total * part.lower ? part.held : total * part.lower;
  }
  return held - (most < room ? most : room);
}

/** Once mixed, P(1 − M/M') out as a labelled leftover: the rest becomes the planned batch M. */
function scoopedOut(input: RepairInput, pot: RepairPot): RepairChoice[] {
  const [planned, step] = [BigInt(input.planned), BigInt(input.readability)];
  const least = leastTotal(pot, planned, 1n);
  if (least === undefined) return [];
  let removed = ceilDivide(pot.mass * (least - planned), least * step) * step;
  // `least` is rounded up to whole mg, so that one step less may do.
  if (removed >= step && canBecome(withoutMixed(pot, removed - step), planned)) removed -= step;
  return removed < pot.mass ? filled(input, 'scoop-out', withoutMixed(pot, removed), removed) : [];
}

function newInk({ additions }: RepairChoice): number {
  let sum = 0;
  for (const mass of additions.values()) sum += mass;
  return sum;
}

function orKept(choices: readonly RepairChoice[], pot: RepairPot): readonly RepairChoice[] {
  return choices.length > 0 ? choices : [kept(pot)];
}

/** The pot becomes a labelled bucket of what it is. */
function kept(pot: RepairPot): RepairChoice {
  const batch = Number(pot.mass) as Milligrams;
  const off = worstDeviation(pot, pot.mass);
  return { kind: 'keep-as-leftover', batch, removed: 0 as Milligrams, additions: new Map(), worstDeviation: off };
}

function requirePot(input: RepairInput): RepairPot {
  const { target, contents, lastAddition: last, planned, capacity } = input;
  requireStep(input.readability);
  requireWhole(target);
  for (const off of input.tolerance.values()) partsPerBillion(off);
  for (const { composition, mass } of contents) {
    requireWhole(composition);
    milligrams(mass);
  }
  if (milligrams(planned) === 0) throw new MassError('A batch of nothing cannot be repaired. Give its planned mass.');
  if (planned > milligrams(capacity)) {
    throw new RepairError(`A batch of ${planned} mg does not fit a container of ${capacity} mg. Take a larger one.`);
  }
  const pot = potOf(contents, target, input.tolerance);
  if (pot.mass > BigInt(capacity)) {
    throw new RepairError(`${pot.mass} mg do not lie in a container of ${capacity} mg. Correct the weights or it.`);
  }
  const held = pot.parts.find(({ id }) => id === last?.componentId)?.held ?? 0n;
  if (last !== undefined && BigInt(milligrams(last.mass)) * PPB > held) {
    throw new RepairError(
      `The last addition, ${last.mass} mg, is not among what lies in the pot. Add it to the contents.`,
    );
  }
  return pot;
}
