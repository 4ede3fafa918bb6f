import Fraction from 'fraction.js';
import type { RepairChoice, RepairInput } from '#domain/repair-overshoot.ts';

const ZERO = new Fraction(0);
const BILLION = new Fraction(1_000_000_000);

/** p_j in mg, exact. */
function heldOf({ contents }: RepairInput): Map<string, Fraction> {
  const held = new Map<string, Fraction>();
  for (const { composition, mass } of contents) {
    for (const [id, share] of composition) {
      held.set(id, (held.get(id) ?? ZERO).add(new Fraction(share).div(BILLION).mul(mass)));
    }
  }
  return held;
}

function shareOf(map: ReadonlyMap<string, number>, id: string): Fraction {
  return new Fraction(map.get(id) ?? 0).div(BILLION);
}

function componentsOf(input: RepairInput): Set<string> {
  return new Set([...input.target.keys(), ...input.contents.flatMap(({ composition }) => [...composition.keys()])]);
}

/** Whether core mathematics C lets what lies in the pot become `total` mg: term by term, in fractions. */
export function fitsExactly(input: RepairInput, total: bigint): boolean {
  const held = heldOf(input);
  const all = new Fraction(total);
  let least = ZERO;
  for (const id of componentsOf(input)) {
    const [amount, share, off] = [held.get(id) ?? ZERO, shareOf(input.target, id), shareOf(input.tolerance, id)];
    if (amount.gt(all.mul(share.add(off)))) return false;
    const edge = all.mul(share.sub(off));
    least = least.add(amount.gt(edge) ? amount : edge.gt(0) ? edge : ZERO);
  }
  return least.lte(all) && sumOf(held).lte(all);
}

/** The state by its definition: "never" is told from "not yet" at a batch of a thousand million tonnes. */
export function stateOf(input: RepairInput): string {
  const held = heldOf(input);
  const mass = sumOf(held);
  const total = mass.gt(input.planned) ? mass : new Fraction(input.planned);
  if (total.d !== 1n) throw new Error('What lies in the pot is whole mg.');
  if (!fitsExactly(input, total.n)) return fitsExactly(input, 10n ** 21n) ? 'over' : 'beyond-repair';
  const strict = { ...input, tolerance: new Map() };
  return fitsExactly(strict, total.n) ? 'on-plan' : 'within-tolerance';
}

/** Everything that is wrong with a repair, by the conditions of core mathematics A and C; shares no code with it. */
export function problemsOf(input: RepairInput, choice: RepairChoice): string[] {
  const problems: string[] = [];
  const held = heldOf(input);
  const d = input.readability;
  for (const [id, mass] of choice.additions) {
    if (!Number.isSafeInteger(mass) || mass <= 0 || mass % d !== 0)
      problems.push(`${mass} mg of ${id} is off the step`);
    if (!input.target.has(id)) problems.push(`${id} is not in the formula`);
  }
  const end = removedFrom(input, held, choice);
  for (const [id, mass] of choice.additions) end.set(id, (end.get(id) ?? ZERO).add(mass));
  const total = sumOf(end);
  if (!total.equals(choice.batch)) problems.push(`it adds up to ${total.toFraction()} mg, not to ${choice.batch}`);
  if (choice.batch < input.planned) problems.push(`${choice.batch} mg is less than planned`);
  if (choice.batch > input.capacity) problems.push(`${choice.batch} mg does not fit`);
  let worst = ZERO;
  for (const id of componentsOf(input)) {
    const [amount, share, off] = [end.get(id) ?? ZERO, shareOf(input.target, id), shareOf(input.tolerance, id)];
    const away = amount.sub(total.mul(share)).abs();
    const most = share.equals(0) ? total.add(d).mul(off) : total.mul(off).add(d);
    if (amount.lt(0)) problems.push(`${id} is taken out though it is not there`);
    if (away.gt(most)) problems.push(`${id} is ${away.toString()} mg away, at most ${most.toString()} may be`);
    if (away.gt(worst)) worst = away;
  }
  const deviation = worst.div(total).mul(BILLION).ceil();
  if (!deviation.equals(choice.worstDeviation)) problems.push(`the worst deviation is ${deviation.toString()} ppb`);
  return problems;
}

function removedFrom(input: RepairInput, held: Map<string, Fraction>, choice: RepairChoice): Map<string, Fraction> {
  if (choice.kind === 'take-back') {
    const { componentId = '', mass = 0 } = input.lastAddition ?? {};
    const end = new Map(held).set(componentId, (held.get(componentId) ?? ZERO).sub(choice.removed));
    return choice.removed > mass ? new Map() : end;
  }
  const mass = sumOf(held);
  if (choice.removed === 0) return new Map(held);
  const left = mass.sub(choice.removed).div(mass);
  return new Map([...held].map(([id, amount]) => [id, amount.mul(left)]));
}

/** mg of fresh ink. */
export function newInk(choice: RepairChoice): number {
  return [...choice.additions.values()].reduce((sum, mass) => sum + mass, 0);
}

function sumOf(amounts: ReadonlyMap<string, Fraction>): Fraction {
  return [...amounts.values()].reduce((sum, amount) => sum.add(amount), ZERO);
}
