import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, compositionFromParts } from './composition.ts';
import { type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { type RepairInput, repairOvershoot } from './repair-overshoot.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const d = mg(0.1);
const pure = (componentId: string, grams: number) => ({
  composition: new Map([[componentId, WHOLE]]) as Composition,
  mass: mg(grams),
});
const target = compositionFromParts([
  { componentId: 'base', parts: '80' },
  { componentId: 'blue', parts: '20' },
]);

function repair(given: Partial<RepairInput> & Pick<RepairInput, 'contents'>) {
  return repairOvershoot({
    target,
    planned: mg(500),
    tolerance: new Map(),
    capacity: mg(2000),
    readability: d,
    ...given,
  });
}

describe('repairing an overshoot', () => {
  test('10 g of blue too much needs the batch to grow until blue is its share again', () => {
    const { state, choices } = repair({ contents: [pure('blue', 110)] });
    expect(state).toBe('over');
    // 110 g is 20 % of 550 g; one step over is the scale's own rounding: (110 − 0.1) / 0.2 = 549.5 g.
    expect(choices[0]).toMatchObject({ kind: 'grow', batch: mg(549.5), removed: 0 });
    expect(choices[0]?.additions).toEqual(new Map([['base', mg(439.5)]]));
  });

  test('what lies unmixed on top is taken back first, since that costs no ink', () => {
    const { choices } = repair({
      contents: [pure('blue', 110)],
      lastAddition: { componentId: 'blue', mass: mg(110) },
    });
    expect(choices.map((choice) => choice.kind)).toEqual(['take-back', 'grow']);
    expect(choices[0]).toMatchObject({ removed: mg(10), batch: mg(500) });
    expect(choices[0]?.additions).toEqual(new Map([['base', mg(400)]]));
  });

  test('an overshoot inside the tolerance is carried on with', () => {
    const tolerance = new Map([
      ['blue', 5_000_000 as PartsPerBillion],
      ['base', 50_000_000 as PartsPerBillion],
    ]);
    const { state, choices } = repair({ contents: [pure('blue', 102)], tolerance });
    expect(state).toBe('within-tolerance');
    expect(choices[0]).toMatchObject({ kind: 'carry-on', batch: mg(500) });
    expect(choices[0]?.worstDeviation).toBe(4_000_000);
  });

  test('nothing over is on plan', () => {
    expect(repair({ contents: [pure('blue', 100)] }).state).toBe('on-plan');
  });

  test('a component that the formula does not have cannot be repaired, only kept as a leftover', () => {
    const { state, choices } = repair({ contents: [pure('base', 100), pure('red', 2)] });
    expect(state).toBe('beyond-repair');
    expect(choices.map((choice) => choice.kind)).toEqual(['keep-as-leftover']);
  });

  test('the wrong pail, still unmixed on top, can be taken back', () => {
    const { state, choices } = repair({
      contents: [pure('base', 100), pure('red', 2)],
      lastAddition: { componentId: 'red', mass: mg(2) },
    });
    expect(state).toBe('beyond-repair');
    expect(choices.map((choice) => [choice.kind, choice.removed])).toEqual([
      ['take-back', mg(2)],
      ['keep-as-leftover', 0],
    ]);
  });

  test('where the container is too small, ink is scooped out and the rest grows inside it', () => {
    const { choices } = repair({ contents: [pure('base', 400), pure('blue', 150)], capacity: mg(600) });
    const [scoop] = choices;
    expect(scoop?.kind).toBe('scoop-out');
    expect(scoop?.batch).toBeLessThanOrEqual(mg(600));
    // 150 g of blue is the share of 750 g, so a fifth of the 550 g must go; a step of rounding is let pass.
    expect(scoop?.removed).toBeGreaterThanOrEqual(mg(109));
    expect(scoop?.removed).toBeLessThanOrEqual(mg(110.2));
    expect(scoop?.worstDeviation).toBeLessThanOrEqual(1_000_000);
  });

  test('ends on target whatever was added of the formula, in whole steps, never below what was planned', () => {
    const ids = ['base', 'blue', 'white'];
    const parts = fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 3, maxLength: 3 });
    const added = fc.array(fc.integer({ min: 0, max: 6000 }), { minLength: 3, maxLength: 3 });
    fc.assert(
      fc.property(parts, added, fc.integer({ min: 0, max: 20_000_000 }), (of, steps, tau) => {
        fc.pre(steps.some((step) => step > 0));
        const goal = compositionFromParts(ids.map((componentId, n) => ({ componentId, parts: String(of[n]) })));
        const contents = ids.map((id, n) => pure(id, (steps[n] ?? 0) / 10));
        const tolerance = new Map(ids.map((id) => [id, tau as PartsPerBillion]));
        const { choices, state } = repair({ target: goal, contents, tolerance, capacity: mg(1_000_000) });
        const [choice] = choices;
        if (choice === undefined) throw new Error(`No choice in state ${state}.`);
        const held = contents.reduce((sum, { mass }) => sum + mass, 0);
        const extra = [...choice.additions.values()].reduce((sum, mass) => sum + mass, 0);
        expect(held + extra).toBe(choice.batch);
        expect(choice.batch).toBeGreaterThanOrEqual(mg(500));
        ids.forEach((id, n) => {
          const final = (contents[n]?.mass ?? 0) + (choice.additions.get(id) ?? 0);
          const off = Math.abs(final - (choice.batch * (goal.get(id) ?? 0)) / WHOLE);
          expect(off).toBeLessThanOrEqual((choice.batch * tau) / WHOLE + d + 1);
          expect((choice.additions.get(id) ?? 0) % d).toBe(0);
        });
      }),
    );
  });
});
