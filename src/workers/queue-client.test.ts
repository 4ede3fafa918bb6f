import { expect, test } from 'vitest';
import { compositionFromMasses } from '#domain/composition.ts';
import type { FoldInPlan } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { type QueuePlans, type QueueProblem, searchQueue } from '#domain/plan-queue.ts';
import { type Solver, UnverifiedPlanError } from './ask-worker.ts';
import { askQueueSolver } from './queue-client.ts';
import type { FromQueueWorker, QueueProgress, ToQueueWorker } from './queue-messages.ts';
import { searchQueueUntil } from './search-queue-until.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const pure = compositionFromMasses([{ componentId: 'base', mass: mg(1) }]);
const queue: QueueProblem = {
  batches: ['monday', 'tuesday'].map((id) => ({
    id,
    target: pure,
    batch: { minimum: mg(500), maximum: mg(500) },
    tolerance: new Map(),
    readability: mg(0.1),
    minimumFromBucket: mg(20),
    minimumFresh: mg(0),
    sliver: mg(20),
    maximumBuckets: 2,
    worthOpening: mg(50),
  })),
  buckets: [{ id: 'left', usable: mg(800), composition: pure }],
};
const question = { queue, deadlineMs: 6000 };

function planned(): QueuePlans {
  const search = searchQueue(queue);
  for (;;) {
    const step = search.next();
    if (step.done) return step.value;
  }
}

/** A worker's port: messages cross by structured clone, both ways. */
function makeSolver(answer: (id: number, reply: (message: FromQueueWorker) => void) => void) {
  const events = new EventTarget();
  const sent: ToQueueWorker[] = [];
  const reply = (message: FromQueueWorker) =>
    events.dispatchEvent(new MessageEvent('message', { data: structuredClone(message) }));
  const solver: Solver = {
    postMessage: (message: ToQueueWorker) => {
      sent.push(structuredClone(message));
      if ('id' in message) queueMicrotask(() => answer(message.id, reply));
    },
    addEventListener: events.addEventListener.bind(events) as Solver['addEventListener'],
    removeEventListener: events.removeEventListener.bind(events) as Solver['removeEventListener'],
  };
  return { solver, sent, reply };
}

test('the plans of a queue cross from the worker as they were, after their progress', async () => {
  const found = planned();
  const seen: QueueProgress[] = [];
  const { solver, sent } = makeSolver((id, reply) => {
    reply({ id, kind: 'progress', reused: mg(500), bound: mg(900) });
    reply({ id, kind: 'done', found });
  });
  expect(await askQueueSolver(solver, question, (progress) => seen.push(progress))).toEqual(found);
  expect(seen).toEqual([expect.objectContaining({ reused: mg(500), bound: mg(900) })]);
  expect(sent[0]).toMatchObject({ problem: question });
});

test('plans that take more of a bucket than there is are never given', async () => {
  const found = planned();
  const [most] = [...found.plans.values()].sort((a, b) => b.reused - a.reused) as [FoldInPlan];
  const plans = new Map([...found.plans.keys()].map((id) => [id, most]));
  const { solver } = makeSolver((id, reply) => reply({ id, kind: 'done', found: { ...found, plans } }));
  await expect(askQueueSolver(solver, question)).rejects.toThrow(UnverifiedPlanError);
});

test('a cancelled queue tells the worker', async () => {
  const { solver, sent, reply } = makeSolver(() => {});
  const cancel = new AbortController();
  const asked = askQueueSolver(solver, question, undefined, cancel.signal);
  cancel.abort();
  await expect(asked).rejects.toThrow('Cancelled.');
  const { id } = sent[0] as { id: number };
  expect(sent[1]).toEqual({ cancel: id });
  reply({ id, kind: 'done', found: planned() });
});

test('a queue that the search refuses is told in its words', async () => {
  const { solver } = makeSolver((id, reply) => reply({ id, kind: 'failed', message: 'Batch monday stands twice.' }));
  await expect(askQueueSolver(solver, question)).rejects.toThrow('Batch monday stands twice.');
});

const found = (reused: number): QueuePlans => ({ plans: new Map(), reused: mg(reused), bound: mg(900) });

function* finding(...list: QueuePlans[]) {
  yield* list;
  return list.at(-1) as QueuePlans;
}

/** A clock that moves a step each time it is read. */
function clockOf(stepMs: number, pause = async () => {}) {
  let time = 0;
  return { elapsed: () => (time += stepMs), deadlineMs: 1000, pause };
}

test('a queue stopped at its deadline has the best plans so far with their bound', async () => {
  const search = finding(found(1), found(2), found(3));
  expect(
    await searchQueueUntil(
      search,
      clockOf(400),
      () => false,
      () => {},
    ),
  ).toEqual(found(2));
});

test('a queue that ends in time tells its progress now and then', async () => {
  const told: QueuePlans[] = [];
  const search = finding(found(1), found(2), found(3));
  expect(
    await searchQueueUntil(
      search,
      clockOf(25),
      () => false,
      (each) => told.push(each),
    ),
  ).toEqual(found(3));
  expect(told).toEqual([found(2)]);
});

test('a cancelled search of a queue ends without plans', async () => {
  let pauses = 0;
  const clock = clockOf(100, async () => void (pauses += 1));
  const search = finding(found(1), found(2), found(3));
  expect(
    await searchQueueUntil(
      search,
      clock,
      () => pauses === 1,
      () => {},
    ),
  ).toBeUndefined();
});
