import { type Leftovers, fromOpenStep, requireLeftover, toOpenStep } from '#components/ui/weighing-step.ts';
import type { Addition } from '#contract/operation-bodies.ts';
import type { OpenStep, Weighing } from '#contract/weighing.ts';
import type { Composition } from '#domain/composition.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { replanSteps } from '#domain/weighing-steps.ts';

const WHOLE = 1_000_000_000 as PartsPerBillion;

/** What has gone into the pot so far; a bucket counts by what it held when the plan was made. */
export function potContents(
  additions: readonly Addition[],
  leftovers: Leftovers,
): { composition: Composition; mass: Milligrams }[] {
  return additions.map((addition) => ({
    composition:
      addition.kind === 'component'
        ? new Map([[addition.componentId, WHOLE]])
        : requireLeftover(leftovers, addition.bucketId),
    mass: addition.actualMg as Milligrams,
  }));
}

/** What every change of an open batch needs to solve the rest again. */
export interface Target {
  target: Composition;
  tolerance: ReadonlyMap<string, PartsPerBillion>;
  readability: Milligrams;
  now: Date;
}

export interface Reading {
  actual: Milligrams;
  lotId: string | null;
  actorId: string;
  /** For a leftover: its tub was scraped empty. */
  emptied: boolean;
}

/** The batch after its first remaining step was weighed: logged, and the rest re-solved to end on target. */
export function logAddition(weighing: Weighing, reading: Reading, target: Target): Weighing {
  const [step, ...rest] = weighing.remaining;
  if (step === undefined) throw new Error('No step is left to log.');
  const additions = [...weighing.additions, additionOf(step, weighing.scaleId, reading, target.now)];
  return replan({ ...weighing, additions, remaining: rest }, target);
}

/** Takes the last entry back; its step comes first again. */
export function undoAddition(weighing: Weighing, target: Target): Weighing {
  const last = weighing.additions.at(-1);
  if (last === undefined) return weighing;
  const again = stepAgain(last);
  const others = weighing.remaining.filter(
    (step) => !(step.kind === 'component' && again.kind === 'component' && step.componentId === again.componentId),
  );
  return replan({ ...weighing, additions: weighing.additions.slice(0, -1), remaining: [again, ...others] }, target);
}

function replan(weighing: Weighing, target: Target): Weighing {
  const next = replanSteps({
    target: target.target,
    planned: weighing.plannedMg as Milligrams,
    contents: potContents(weighing.additions, weighing.leftovers),
    remaining: weighing.remaining.map((step) => fromOpenStep(step, weighing.leftovers)),
    tolerance: target.tolerance,
    readability: target.readability,
  });
  return {
    ...weighing,
    batchMg: next.batch,
    remaining: next.steps.map(toOpenStep),
    updatedAt: target.now.toISOString(),
  };
}

function additionOf(step: OpenStep, scaleId: string, reading: Reading, now: Date): Addition {
  const entry = {
    scaleId,
    plannedMg: step.plannedMg as Milligrams,
    actualMg: reading.actual,
    at: now.toISOString(),
    actorId: reading.actorId,
  };
  return step.kind === 'component'
    ? { kind: 'component', componentId: step.componentId, lotId: reading.lotId, ...entry }
    : { kind: 'bucket', bucketId: step.bucketId, empties: reading.emptied, ...entry };
}

function stepAgain(addition: Addition): OpenStep {
  const { plannedMg } = addition;
  return addition.kind === 'component'
    ? { kind: 'component', componentId: addition.componentId, plannedMg }
    : { kind: 'bucket', bucketId: addition.bucketId, plannedMg, empties: addition.empties };
}
