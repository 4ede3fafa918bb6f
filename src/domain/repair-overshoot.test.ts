import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Composition, CompositionError, compositionFromParts } from './composition.ts';
import { fitsExactly, newInk, problemsOf, stateOf } from '#tests/support/check-repair.ts';
import { MassError, type Milligrams, type PartsPerBillion, WHOLE } from './mass.ts';
import { RepairError, type RepairInput, repairOvershoot } from './repair-overshoot.ts';

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
    // 110 g is 20 % of 550 g.
    expect(choices).toEqual([
      { kind: 'grow', batch: mg(550), removed: 0, additions: new Map([['base', mg(440)]]), worstDeviation: 0 },
    ]);
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

  test('where the container is too small, so much is scooped out that the rest becomes the planned batch', () => {
    const { state, choices } = repair({ contents: [pure('base', 400), pure('blue', 150)], capacity: mg(600) });
    expect(state).toBe('over');
    // 150 g of blue is the share of 750 g: P(1 − M/M') = 550·(1 − 500/750) = 183.3 g.
    expect(choices).toMatchObject([{ kind: 'scoop-out', removed: mg(183.4), batch: mg(500) }]);
    expect(choices[0]?.worstDeviation).toBeLessThanOrEqual(200_000);
  });

  test('where the container is too small and the last addition lies on top, taking it back comes before scooping', () => {
    const { choices } = repair({
      contents: [pure('base', 400), pure('blue', 150)],
      lastAddition: { componentId: 'blue', mass: mg(60) },
      capacity: mg(600),
    });
    expect(choices.map((choice) => choice.kind)).toEqual(['take-back', 'scoop-out']);
    expect(choices[0]).toMatchObject({ removed: mg(50), batch: mg(500), additions: new Map() });
  });

  test('where taking back all that is unmixed is not enough, the batch still grows less', () => {
    const { choices } = repair({
      contents: [pure('base', 420), pure('blue', 150)],
      lastAddition: { componentId: 'blue', mass: mg(60) },
    });
    // 420 g of base is the share of 525 g, of which 105 g is blue.
    expect(choices).toMatchObject([
      { kind: 'take-back', removed: mg(45), batch: mg(525) },
      { kind: 'grow', removed: 0, batch: mg(750) },
    ]);
  });

  test('a pot that is fuller than planned but in proportion is on plan: the end is what lies in it', () => {
    const { state, choices } = repair({ contents: [pure('base', 480), pure('blue', 120)] });
    expect(state).toBe('on-plan');
    expect(choices).toMatchObject([{ kind: 'carry-on', batch: mg(600), additions: new Map(), worstDeviation: 0 }]);
  });

  test('one step more than planned is over where nothing may be off', () => {
    const { state, choices } = repair({ contents: [pure('blue', 100.1)] });
    expect(state).toBe('over');
    expect(choices[0]).toMatchObject({ kind: 'grow', batch: mg(500.5) });
  });

  test('a foreign component inside its tolerance needs a batch that is large enough for it', () => {
    const tolerance = new Map([
      ['red', 4_000_000 as PartsPerBillion],
      ['base', 50_000_000 as PartsPerBillion],
    ]);
    expect(repair({ contents: [pure('red', 2)], tolerance }).state).toBe('within-tolerance');
    const { state, choices } = repair({ contents: [pure('red', 4)], tolerance });
    expect(state).toBe('over');
    expect(choices).toMatchObject([{ kind: 'grow', batch: mg(1000) }]);
    // 0.4 % of red leaves no room when nothing else may be short.
    const strict = new Map([['red', 4_000_000 as PartsPerBillion]]);
    expect(repair({ contents: [pure('red', 2)], tolerance: strict }).state).toBe('beyond-repair');
  });

  test('a leftover whose mass is between two steps keeps it: only what is added is weighed', () => {
    const leftover = { composition: target, mass: 123_456 as Milligrams };
    const { state, choices } = repair({ contents: [leftover] });
    expect(state).toBe('on-plan');
    expect(choices[0]?.batch).toBe(500_056);
  });

  test('1 mg, 1,000 kg and 24 components', () => {
    const wide = compositionFromParts(
      Array.from({ length: 24 }, (_, n) => ({ componentId: `c${n}`, parts: `${n + 1}` })),
    );
    const one = { target: wide, readability: 1 as Milligrams };
    const small = repair({ ...one, planned: 1 as Milligrams, contents: [] });
    expect(small.choices[0]?.batch).toBe(1);
    const large = 1_000_000_000 as Milligrams;
    const contents = [{ composition: new Map([['c0', WHOLE]]), mass: 5_000_000 as Milligrams }];
    const { state, choices } = repair({ ...one, planned: large, capacity: (2 * large) as Milligrams, contents });
    expect(state).toBe('over');
    expect(choices[0]?.batch).toBe(Math.ceil((5_000_000 * 1e9) / (wide.get('c0') ?? 1)));
  });
});

describe('every repair', () => {
  const ids = ['base', 'blue', 'white', 'red'];
  const parts = fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 2, maxLength: 3 });
  const amounts = fc.array(fc.oneof(fc.constant(0), fc.integer({ min: 0, max: 6_000 })), {
    minLength: 4,
    maxLength: 4,
  });
  const offs = fc.array(fc.oneof(fc.constant(0), fc.integer({ min: 0, max: 3e7 })), { minLength: 4, maxLength: 4 });
  const anyCase = fc
    .record({ parts, amounts, offs, step: fc.constantFrom(1, 100, 500), room: fc.integer({ min: 0, max: 1_500 }) })
    .chain((given) => fc.integer({ min: 0, max: 4 }).map((last) => ({ ...given, last })));

  interface Case {
    parts: number[];
    amounts: number[];
    offs: number[];
    step: number;
    room: number;
    last: number;
  }

  function inputOf({ parts: of, amounts: put, offs: off, step, room, last }: Case): RepairInput {
    const contents = ids.map((id, n) => pure(id, (put[n] ?? 0) / 10));
    const held = contents.reduce((sum, { mass }) => sum + mass, 0);
    return {
      target: compositionFromParts(of.map((part, n) => ({ componentId: ids[n] as string, parts: String(part) }))),
      planned: mg(500),
      contents,
      lastAddition: last === 4 ? undefined : { componentId: ids[last] as string, mass: contents[last]?.mass ?? mg(0) },
      tolerance: new Map(ids.map((id, n) => [id, (off[n] ?? 0) as PartsPerBillion] as const)),
      capacity: (Math.max(held, mg(500)) + room * 1000) as Milligrams,
      readability: step as Milligrams,
    };
  }

  test('ends on target within the tolerance and a step, adds whole steps, fits, and is no smaller than planned', () => {
    fc.assert(
      fc.property(anyCase, (given) => {
        const input = inputOf(given);
        const { state, choices } = repairOvershoot(input);
        expect(choices.length).toBeGreaterThan(0);
        for (const choice of choices) {
          if (choice.kind !== 'keep-as-leftover') expect(problemsOf(input, choice)).toEqual([]);
        }
        expect(state).toBe(stateOf(input));
        const extra = choices.filter(({ kind }) => kind !== 'keep-as-leftover').map((choice) => newInk(choice));
        expect(extra).toEqual([...extra].sort((a, b) => a - b));
      }),
      { numRuns: 1500 },
    );
  });

  test('that grows is the least: a step less has no room for the lower edges, or is too much of one component', () => {
    fc.assert(
      fc.property(anyCase, (given) => {
        const input = inputOf(given);
        const grow = repairOvershoot(input).choices.find(({ kind }) => kind === 'grow');
        if (grow === undefined) return;
        expect(fitsExactly(input, BigInt(grow.batch))).toBe(true);
        expect(fitsExactly(input, BigInt(grow.batch - input.readability))).toBe(false);
      }),
      { numRuns: 1500 },
    );
  });

  test('once carried out is within tolerance and a step more, and asks for nothing more', () => {
    fc.assert(
      fc.property(anyCase, (given) => {
        const input = inputOf({ ...given, last: 4 });
        const [choice] = repairOvershoot(input).choices;
        if (choice?.kind !== 'grow') return;
        const rounding = Math.ceil((input.readability * WHOLE) / choice.batch);
        const wider = new Map(
          [...input.tolerance].map(([id, off]) => [id, (off + rounding) as PartsPerBillion] as const),
        );
        const contents = [...input.contents, ...[...choice.additions].map(([id, mass]) => pure(id, mass / 1000))];
        const after = repairOvershoot({ ...input, planned: choice.batch, contents, tolerance: wider });
        expect(['on-plan', 'within-tolerance']).toContain(after.state);
        expect(after.choices[0]?.additions.size).toBe(0);
      }),
      { numRuns: 500 },
    );
  });
});

describe('a pot that cannot be', () => {
  const contents = [pure('blue', 110)];
  const bad = (value: number) => value as Milligrams;

  test('is refused by name', () => {
    expect(() => repair({ contents, planned: bad(-1) })).toThrow(MassError);
    expect(() => repair({ contents, planned: bad(0) })).toThrow(MassError);
    expect(() => repair({ contents, planned: bad(Number.NaN) })).toThrow(MassError);
    expect(() => repair({ contents, readability: bad(0) })).toThrow(MassError);
    expect(() => repair({ contents, capacity: bad(Infinity) })).toThrow(MassError);
    expect(() => repair({ contents: [{ ...pure('blue', 1), mass: bad(-5) }] })).toThrow(MassError);
    expect(() => repair({ contents, tolerance: new Map([['blue', -1 as PartsPerBillion]]) })).toThrow(MassError);
    expect(() => repair({ contents, target: new Map([['blue', 7 as PartsPerBillion]]) })).toThrow(CompositionError);
    expect(() => repair({ contents: [{ composition: new Map(), mass: mg(1) }] })).toThrow(CompositionError);
  });

  test('is refused where the container cannot hold it, or the last addition is not in it', () => {
    expect(() => repair({ contents, planned: mg(50), capacity: mg(100) })).toThrow(RepairError);
    expect(() => repair({ contents, planned: mg(500), capacity: mg(400) })).toThrow(RepairError);
    const last = (componentId: string, grams: number) => ({ lastAddition: { componentId, mass: mg(grams) } });
    expect(() => repair({ contents, ...last('red', 1) })).toThrow(RepairError);
    expect(() => repair({ contents, ...last('blue', 110.1) })).toThrow(RepairError);
    expect(() => repair({ contents, ...last('blue', Number.NaN) })).toThrow(MassError);
  });
});
