import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Operation } from '#contract/operation.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type Shown, foldPending } from '#offline/overlay.ts';
import { isPendingAt } from '#offline/pending.ts';
import { facts, operationOf, shownOf } from '#tests/support/overlay.ts';
import { batchMixed, fromTub, relocated, returned } from '#tests/support/operations.ts';
import { tubRow } from '#tests/support/rows.ts';

const RUNS = Number(process.env['MODEL_RUNS'] ?? 500);
const MOST_COMMANDS = 100;

const tubs = [tubRow({ code: 'AC111111' }), tubRow({ code: 'AC222222' })] as const;
const START_MG = 500_000;
const nothing = facts();

type Act = { kind: 'use' | 'count' | 'back' | 'out' | 'move'; tub: 0 | 1; grams: number };
type Command =
  | { do: 'record'; act: Act }
  | { do: 'elsewhere'; act: Act }
  | { do: 'push'; most: number; answered: boolean }
  | { do: 'pull' };

const act = fc.record<Act>({
  kind: fc.constantFrom('use', 'count', 'back', 'out', 'move'),
  tub: fc.constantFrom(0, 1),
  grams: fc.integer({ min: 1, max: 700 }),
});
const command: fc.Arbitrary<Command> = fc.oneof(
  { weight: 4, arbitrary: fc.record({ do: fc.constant('record' as const), act }) },
  { weight: 2, arbitrary: fc.record({ do: fc.constant('elsewhere' as const), act }) },
  {
    weight: 2,
    arbitrary: fc.record({
      do: fc.constant('push' as const),
      most: fc.integer({ min: 1, max: 5 }),
      answered: fc.boolean(),
    }),
  },
  { weight: 2, arbitrary: fc.constant({ do: 'pull' as const }) },
);

/** A server that is a list, and a station that is a queue over rows of some moment. */
class Model {
  readonly log: Operation[] = [];
  readonly queue: { operation: Operation; status: 'waiting' | 'sent'; changeSeq: number | null }[] = [];
  seq = 0;
  cached: Shown = shownOf(...tubs);

  /** What the code under test shows. */
  shown(): Shown {
    const pending = this.queue.filter((entry) => isPendingAt(entry, this.seq)).map(({ operation }) => operation);
    return foldPending(this.cached, pending, nothing);
  }

  /** Milligrams of a tub, as arithmetic on the entries says: each that is known here, once. */
  expectedMg(tub: 0 | 1): number {
    const contained = this.log.slice(0, this.seq);
    const own = this.queue.map(({ operation }) => operation).filter((operation) => !contained.includes(operation));
    return [...contained, ...own].reduce((sum, operation) => sum + changeOf(operation, tubs[tub].id), START_MG);
  }

  run(command: Command): void {
    switch (command.do) {
      case 'record':
        this.queue.push({ operation: this.entry(command.act, this.shown()), status: 'waiting', changeSeq: null });
        break;
      case 'elsewhere':
        this.log.push(this.entry(command.act, this.rowsNow()));
        break;
      case 'push':
        return this.push(command.most, command.answered);
      case 'pull':
        return this.pull();
    }
  }

  private push(most: number, answered: boolean): void {
    for (const entry of this.queue.filter(({ status }) => status === 'waiting').slice(0, most)) {
      if (!this.log.includes(entry.operation)) this.log.push(entry.operation);
      const changeSeq = this.log.indexOf(entry.operation) + 1;
      if (answered) Object.assign(entry, { status: 'sent', changeSeq });
    }
  }

  private pull(): void {
    this.cached = this.rowsNow();
    this.seq = this.log.length;
    for (const entry of this.queue) {
      const changeSeq = this.log.indexOf(entry.operation) + 1;
      if (entry.status === 'waiting' && changeSeq > 0) Object.assign(entry, { status: 'sent', changeSeq });
    }
  }

  private rowsNow(): Shown {
    return foldPending(shownOf(...tubs), this.log, nothing);
  }

  private entry({ kind, tub, grams }: Act, seen: Shown): Operation {
    const row = seen.buckets.get(tubs[tub].id) ?? tubs[tub];
    return operationOf(bodyOf(kind, row, 1000 * grams), { [row.id]: row.seen });
  }
}

function bodyOf(kind: Act['kind'], { id, tareMg, balanceMg }: (typeof tubs)[number], net: number): OperationBody {
  const weighed = { grossMg: (tareMg + net) as Milligrams, tareMg: tareMg as Milligrams, displayedMg: balanceMg };
  if (kind === 'use') return batchMixed([fromTub(id, net)]);
  if (kind === 'count')
    return { type: 'bucket-recounted', body: { bucketId: id, ...weighed, deltaMg: net - balanceMg } };
  if (kind === 'back') return returned(id, { ...weighed, deltaMg: net - balanceMg });
  if (kind === 'out') return { type: 'bucket-issued', body: { bucketId: id, jobId: null, overrideReason: null } };
  return relocated(id);
}

function changeOf({ type, body }: Operation, id: string): number {
  if (type === 'bucket-recounted' || type === 'bucket-returned') return body.bucketId === id ? body.deltaMg : 0;
  if (type !== 'batch-mixed') return 0;
  return body.additions.reduce(
    (sum, addition) => (addition.kind === 'bucket' && addition.bucketId === id ? sum - addition.actualMg : sum),
    0,
  );
}

test('whatever is recorded, sent, lost and fetched, a tub shows each known entry once, and when it is quiet the server’s row', () => {
  const property = fc.property(fc.array(command, { maxLength: MOST_COMMANDS }), (commands) => {
    const model = new Model();
    for (const one of commands) {
      model.run(one);
      for (const tub of [0, 1] as const)
        expect(model.shown().buckets.get(tubs[tub].id)?.balanceMg).toBe(model.expectedMg(tub));
    }
    model.run({ do: 'push', most: commands.length, answered: true });
    model.run({ do: 'pull' });
    expect(model.shown()).toEqual(model.cached);
    for (const { operation } of model.queue) expect(model.log.filter((logged) => logged === operation)).toHaveLength(1);
  });
  fc.assert(property, { numRuns: RUNS });
});
