import type { Addition } from '#contract/operation-bodies.ts';
import { makeBucketCode } from '#domain/bucket-code.ts';
import { compositionFromParts } from '#domain/composition.ts';
import { contentsOf, fillPot } from '#domain/fill-pot.ts';
import type { Milligrams, PartsPerBillion } from '#domain/mass.ts';
import { scaleWeights } from '#domain/scale-weights.ts';
import type { Writer } from './operation-writer.ts';
import { type SeedContext, type SeedFormula, daysBefore } from './seed-context.ts';

interface Tub {
  id: string;
  formula: SeedFormula;
  balanceMg: number;
  tareMg: number;
  wallLossMg: number;
  state: 'shelf' | 'at-press' | 'empty';
  blended: boolean;
}

const STEP = 100 as Milligrams;
const LOOSE = 60_000_000 as PartsPerBillion;

/** Batches of three months as a hand weighs them, some with an older leftover in them, most back from a press. */
export class History {
  readonly tubs: Tub[] = [];
  private readonly context: SeedContext;
  private readonly writer: Writer;
  private readonly prefix: string;

  constructor(context: SeedContext, writer: Writer, prefix: string) {
    this.context = context;
    this.writer = writer;
    this.prefix = prefix;
  }

  nextCode(): string {
    return makeBucketCode(this.prefix, this.given++);
  }
  private given = 1;

  /** @param leftover a tub that is scraped into the batch first */
  mix(formula: SeedFormula, batchMg: number, daysAgo: number, leftover?: Tub): Tub {
    const { random, people, today } = this.context;
    const at = new Date(daysBefore(today, daysAgo).getTime() + random.int(7, 16) * 3_600_000);
    const actorId = people.get('mixer') as string;
    const additions = this.weighIn(formula, batchMg as Milligrams, at, actorId, leftover);
    const massMg = additions.reduce((sum, addition) => sum + addition.actualMg, 0);
    const container =
      this.context.containers.find((entry) => entry.capacityMl * 1000 >= massMg) ?? this.context.containers.at(-1);
    if (container === undefined) throw new Error('No container.');
    const tareMg = container.tareMg + random.int(-8, 8) * 100;
    const tub: Tub = {
      id: random.uuid(),
      formula,
      balanceMg: massMg,
      tareMg,
      wallLossMg: container.wallLossMg,
      state: 'shelf',
      blended: leftover !== undefined,
    };
    const locationId = random.pick(this.context.locations);
    const release = { light: random.pick(['Daylight D65', 'Shop light']), byEye: true, at: at.toISOString() };
    const filled = [
      {
        bucketId: tub.id,
        code: this.nextCode(),
        containerId: container.id,
        tareMg: tareMg as Milligrams,
        massMg: massMg as Milligrams,
        locationId,
      },
    ];
    const body = {
      batchId: random.uuid(),
      formulaId: formula.id,
      revision: formula.revision,
      plannedMg: batchMg as Milligrams,
      jobId: null,
      rush: true,
      additions,
      release,
      filled,
    };
    this.writer.write({ type: 'batch-mixed', body }, at, actorId);
    if (leftover !== undefined) Object.assign(leftover, { balanceMg: 0, state: 'empty' });
    this.tubs.push(tub);
    return tub;
  }

  private weighIn(
    formula: SeedFormula,
    batch: Milligrams,
    at: Date,
    actorId: string,
    leftover: Tub | undefined,
  ): Addition[] {
    const { random, lots, scaleId } = this.context;
    const target = compositionFromParts(formula.parts);
    const entry = { scaleId, at: at.toISOString(), actorId };
    const additions: Addition[] = [];
    let weights: ReadonlyMap<string, Milligrams> = scaleWeights(target, batch, STEP).weights;
    if (leftover !== undefined) {
      const mass = (Math.floor((leftover.balanceMg - leftover.wallLossMg) / STEP) * STEP) as Milligrams;
      const tolerance = new Map([...target.keys()].map((id) => [id, LOOSE]));
      const contents = contentsOf([{ composition: target, mass }]);
      weights = fillPot({ target, tolerance, contents, readability: STEP }, batch) ?? weights;
      additions.push({
        kind: 'bucket',
        bucketId: leftover.id,
        plannedMg: mass,
        actualMg: mass,
        empties: true,
        ...entry,
      });
    }
    for (const [componentId, plannedMg] of weights) {
      if (plannedMg === 0) continue;
      const slip = plannedMg > 20_000 ? random.int(-2, 3) * STEP : random.int(0, 1) * (random.next() < 0.2 ? STEP : 0);
      const actualMg = (plannedMg + slip) as Milligrams;
      additions.push({
        kind: 'component',
        componentId,
        lotId: lots.get(componentId)?.[0] ?? null,
        plannedMg,
        actualMg,
        ...entry,
      });
    }
    return additions;
  }

  issue(tub: Tub, daysAgo: number): void {
    const at = new Date(daysBefore(this.context.today, daysAgo).getTime() + 17 * 3_600_000);
    const body = { bucketId: tub.id, jobId: null, overrideReason: null };
    this.writer.write({ type: 'bucket-issued', body }, at, this.context.people.get('operator') as string);
    tub.state = 'at-press';
  }

  /** @param leftMg what the tub still holds by weight */
  giveBack(tub: Tub, leftMg: number, daysAgo: number, condition: 'clean' | 'lint' | 'dirty'): void {
    const at = new Date(daysBefore(this.context.today, daysAgo).getTime() + 18 * 3_600_000);
    const body = {
      bucketId: tub.id,
      jobId: null,
      grossMg: (leftMg + tub.tareMg) as Milligrams,
      tareMg: tub.tareMg as Milligrams,
      displayedMg: tub.balanceMg,
      deltaMg: leftMg - tub.balanceMg,
      condition,
      locationId: this.context.random.pick(this.context.locations),
    };
    this.writer.write({ type: 'bucket-returned', body }, at, this.context.people.get('operator') as string);
    Object.assign(tub, { balanceMg: leftMg, state: leftMg === 0 ? 'empty' : 'shelf' });
  }
}
