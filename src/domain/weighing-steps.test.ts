import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, blend, compositionFromParts } from './composition.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { scaleWeights } from './scale-weights.ts';
import { type WeighingStep, planSteps, replanSteps } from './weighing-steps.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const d = mg(0.1);
const order = ['base', 'white', 'blue', 'red'];
const target = compositionFromParts([
  { componentId: 'base', parts: '70' },
  { componentId: 'white', parts: '18' },
  { componentId: 'blue', parts: '8' },
  { componentId: 'red', parts: '4' },
]);
const tolerance = new Map<string, PartsPerBillion>();
const pure = (id: string): Composition => new Map([[id, WHOLE]]);

interface Added {
  composition: Composition;
  mass: Milligrams;
}

const stepsFor = (batch: Milligrams) =>
  planSteps({ fromBuckets: [], fresh: scaleWeights(target, batch, d).weights }, order, new Map());

/** Weighs every step, each off by what `errors` says, re-solving after each as the screen does. */
function weighAll(planned: Milligrams, start: WeighingStep[], errors: readonly number[]) {
  const contents: Added[] = [];
  let remaining = start;
  let batch = planned;
  for (let n = 0; remaining.length > 0 && n < 40; n++) {
    const [step, ...rest] = remaining;
    if (step === undefined) break;
    const mass = Math.max(d, step.planned + (errors[n] ?? 0)) as Milligrams;
    contents.push({ composition: step.kind === 'bucket' ? step.composition : pure(step.componentId), mass });
    const next = replanSteps({ target, planned, contents, remaining: rest, tolerance, readability: d });
    remaining = next.steps;
    batch = next.batch;
  }
  return { contents, batch, total: contents.reduce((sum, { mass }) => sum + mass, 0) };
}

function worstOff(contents: readonly Added[]): number {
  const shares = blend(contents);
  const total = contents.reduce((sum, { mass }) => sum + mass, 0);
  return Math.max(...order.map((id) => (Math.abs((shares.get(id) ?? 0) - (target.get(id) ?? 0)) * total) / WHOLE));
}

describe('weighing step by step', () => {
  test('leftovers come first, then fresh ink in the order of the formula', () => {
    const composition = pure('base');
    const steps = planSteps(
      {
        fromBuckets: [{ bucketId: 'tub', mass: mg(100), empties: true }],
        fresh: new Map([
          ['red', mg(4)],
          ['white', mg(0)],
          ['base', mg(70)],
        ]),
      },
      order,
      new Map([['tub', composition]]),
    );
    expect(steps).toEqual([
      { kind: 'bucket', bucketId: 'tub', composition, planned: mg(100), empties: true },
      { kind: 'component', componentId: 'base', planned: mg(70) },
      { kind: 'component', componentId: 'red', planned: mg(4) },
    ]);
  });

  test('ends on target after the third addition was 2 g over', () => {
    const { contents, batch, total } = weighAll(mg(500), stepsFor(mg(500)), [0, 0, mg(2)]);
    expect(total).toBe(batch);
    expect(batch).toBeGreaterThan(mg(500));
    expect(worstOff(contents)).toBeLessThanOrEqual(d);
    // Base and white were done: they come again, in the order of the formula, after what was left.
    expect(contents.length).toBeGreaterThan(4);
  });

  test('everything weighed as planned ends at exactly the mass that was asked for', () => {
    const { contents, total } = weighAll(mg(500), stepsFor(mg(500)), []);
    expect(total).toBe(mg(500));
    expect(contents).toHaveLength(4);
  });

  test('a leftover that waits keeps its mass when fresh ink is re-solved', () => {
    const composition = compositionFromParts([
      { componentId: 'base', parts: '90' },
      { componentId: 'white', parts: '10' },
    ]);
    const tub: WeighingStep = { kind: 'bucket', bucketId: 'tub', composition, planned: mg(123.456), empties: true };
    const { steps, batch } = replanSteps({
      target,
      planned: mg(500),
      contents: [{ composition: pure('base'), mass: mg(250) }],
      remaining: [tub, ...stepsFor(mg(500)).slice(1)],
      tolerance,
      readability: d,
    });
    expect(steps[0]).toEqual(tub);
    expect(steps.slice(1).every(({ planned }) => planned % d === 0)).toBe(true);
    expect(mg(250) + steps.reduce((sum, { planned }) => sum + planned, 0)).toBe(batch);
  });

  test('ends on target whatever the errors of the additions are', () => {
    const errors = fc.array(fc.integer({ min: -30, max: 30 }), { maxLength: 4 });
    fc.assert(
      fc.property(fc.integer({ min: 2000, max: 30000 }), errors, (steps, offs) => {
        const planned = (steps * d) as Milligrams;
        const { contents, total, batch } = weighAll(
          planned,
          stepsFor(planned),
          offs.map((off) => off * d),
        );
        expect(total).toBe(batch);
        expect(worstOff(contents)).toBeLessThanOrEqual(2 * d);
      }),
    );
  });
});
