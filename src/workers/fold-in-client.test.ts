import { expect, test } from 'vitest';
import { compositionFromMasses } from '#domain/composition.ts';
import { type FoldInPlan, type FoldInProblem, foldInBuckets } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';
import { askSolver, type Solver, UnverifiedPlanError } from './fold-in-client.ts';
import type { FromWorker, ToWorker } from './fold-in-messages.ts';

const mg = (grams: number) => Math.round(grams * 1000) as Milligrams;
const pure = compositionFromMasses([{ componentId: 'base', mass: mg(1) }]);
const problem: FoldInProblem = {
  target: pure,
  batch: { minimum: mg(500), maximum: mg(500) },
  buckets: [{ id: 'left', usable: mg(200), composition: pure }],
  tolerance: new Map(),
  readability: mg(0.1),
  minimumFromBucket: mg(20),
  minimumFresh: mg(0),
  sliver: mg(20),
  maximumBuckets: 2,
  worthOpening: mg(50),
};
const plan = foldInBuckets(problem);

/** A worker's port: messages cross by structured clone, both ways. */
function makeSolver(answer: (message: ToWorker, reply: (message: FromWorker) => void) => void) {
  const events = new EventTarget();
  const sent: ToWorker[] = [];
  const reply = (message: FromWorker) =>
    events.dispatchEvent(new MessageEvent('message', { data: structuredClone(message) }));
  const solver: Solver = {
    postMessage: (message: ToWorker) => {
      sent.push(message);
      const received = structuredClone(message);
      queueMicrotask(() => answer(received, reply));
    },
    addEventListener: events.addEventListener.bind(events) as Solver['addEventListener'],
    removeEventListener: events.removeEventListener.bind(events) as Solver['removeEventListener'],
  };
  return { solver, sent, reply, fail: () => events.dispatchEvent(new Event('error')) };
}

const solving = () =>
  makeSolver((message, reply) => {
    if ('problem' in message) reply({ id: message.id, kind: 'done', plan: foldInBuckets(message.problem) });
  });

test('a plan crosses from the worker and back as it was', async () => {
  expect(await askSolver(solving().solver, problem)).toEqual(plan);
});

test('progress is told before the plan', async () => {
  const seen: FoldInPlan[] = [];
  const { solver } = makeSolver((message, reply) => {
    if (!('problem' in message)) return;
    reply({ id: message.id, kind: 'progress', bound: plan.objectiveBound, plan });
    reply({ id: message.id, kind: 'done', plan });
  });
  await askSolver(solver, problem, (found) => seen.push(found));
  expect(seen).toEqual([plan]);
});

test('a plan that does not add up is never given', async () => {
  const wrong = { ...plan, fresh: new Map([...plan.fresh].map(([id, mass]) => [id, (mass + 100) as Milligrams])) };
  const { solver } = makeSolver((message, reply) => {
    if ('problem' in message) reply({ id: message.id, kind: 'done', plan: wrong });
  });
  await expect(askSolver(solver, problem)).rejects.toThrow(UnverifiedPlanError);
});

test('a problem that the search refuses is told in its words', async () => {
  const { solver } = makeSolver((message, reply) => {
    if ('problem' in message) reply({ id: message.id, kind: 'failed', message: 'The batch is off the step.' });
  });
  await expect(askSolver(solver, problem)).rejects.toThrow('The batch is off the step.');
});

test('the answer to another question is not taken', async () => {
  const { solver, reply } = makeSolver(() => {});
  const asked = askSolver(solver, problem);
  reply({ id: -1, kind: 'failed', message: 'of somebody else' });
  const outcome = await Promise.race([asked.catch(() => 'failed'), Promise.resolve('still open')]);
  expect(outcome).toBe('still open');
});

test('a cancelled question tells the worker, and a late answer changes nothing', async () => {
  const { solver, sent, reply } = makeSolver(() => {});
  const cancel = new AbortController();
  const asked = askSolver(solver, problem, undefined, cancel.signal);
  cancel.abort();
  await expect(asked).rejects.toThrow('Cancelled.');
  const question = sent[0] as { id: number };
  expect(sent[1]).toEqual({ cancel: question.id });
  reply({ id: question.id, kind: 'done', plan });
});

test('a question that was cancelled before it was asked is not asked', async () => {
  const { solver, sent } = solving();
  await expect(askSolver(solver, problem, undefined, AbortSignal.abort())).rejects.toThrow('Cancelled.');
  expect(sent).toEqual([]);
});

test('a worker that cannot start fails the question instead of leaving it open', async () => {
  const { solver, fail } = makeSolver(() => {});
  const asked = askSolver(solver, problem);
  fail();
  await expect(asked).rejects.toThrow('could not start');
});
