import { v7 as uuidv7 } from 'uuid';
import { afterEach, expect, test, vi } from 'vitest';
import { accepted, answering, offline, pullAnswer, pushAnswer } from '#tests/support/fake-server.ts';
import { relocated } from '#tests/support/operations.ts';
import { makeStation, START } from '#tests/support/station.ts';
import { recordOperation } from './record-operation.ts';
import { readQueue } from './shown.ts';
import type { Station } from './station.ts';
import type { Surroundings } from './surroundings.ts';
import { type SyncHandle, startSync } from './sync-loop.ts';

const [PUSH, PULL] = ['/api/sync/push', '/api/sync/pull'];
const open: SyncHandle[] = [];
afterEach(() => open.splice(0).forEach((sync) => sync.stop()));

/** A browser in which only the test makes time pass, and the network and the page come back. */
function makeSurroundings() {
  const timers: { ms: number; run: () => void }[] = [];
  let wakeUp = () => {};
  let held = false;
  const around: Surroundings & { online: boolean; held: (by: boolean) => void } = {
    online: true,
    isOnline: () => around.online,
    held: (by) => (held = by),
    onWake: (run) => {
      wakeUp = run;
      return () => (wakeUp = () => {});
    },
    alone: async (_, run) => {
      if (held) return undefined;
      held = true;
      return run().finally(() => (held = false));
    },
    after: (ms, run) => {
      const timer = { ms, run };
      timers.push(timer);
      return () => void (timers.includes(timer) && timers.splice(timers.indexOf(timer), 1));
    },
    soon: (run) => void setTimeout(run, 0),
    jitter: () => 0.5,
  };
  return { around, timers, wake: () => wakeUp() };
}

function start(station: Station, answers: Parameters<typeof answering>[0], now: () => Date = () => START) {
  const server = answering(answers);
  const surroundings = makeSurroundings();
  const begin = () => {
    const sync = startSync(station, { ...server.deps, now }, surroundings.around);
    open.push(sync);
    return sync;
  };
  return { server, begin, ...surroundings };
}

const working = { [PUSH]: (call: Call) => pushAnswer(call, accepted(1)), [PULL]: () => pullAnswer() };
type Call = Parameters<typeof pushAnswer>[0];

test('at the start it sends, fetches, and says when it tries again', async () => {
  const station = await makeStation();
  await recordOperation(station, relocated(uuidv7()));
  const { server, begin, timers } = start(station, working);
  const sync = begin();
  await sync.sendNow();
  expect(server.calls[0]?.path).toBe(PUSH);
  expect(sync.state.getSnapshot()).toMatchObject({
    phase: 'idle',
    lastSent: START.toISOString(),
    nextTry: '2026-11-30T08:00:32.500Z',
  });
  expect(timers.map(({ ms }) => ms)).toEqual([32_500]);
});

test('the first load is told as loading, with its progress', async () => {
  const station = await makeStation();
  const { begin } = start(station, { [PULL]: () => pullAnswer({ remaining: 0 }) });
  const sync = begin();
  const phases: string[] = [];
  sync.state.subscribe(() => phases.push(sync.state.getSnapshot().phase));
  await sync.sendNow();
  expect(phases[0]).toBe('loading');
  expect(sync.state.getSnapshot().loaded).toMatchObject({ done: 0, total: 0 });
  expect(phases.at(-1)).toBe('idle');
});

test('an entry is sent as soon as it is recorded', async () => {
  const station = await makeStation();
  const { server, begin } = start(station, working);
  await begin().sendNow();
  await recordOperation(station, relocated(uuidv7()));
  await vi.waitFor(async () => expect((await readQueue(station)).waiting).toEqual([]));
  expect(server.calls.filter(({ path }) => path === PUSH)).toHaveLength(1);
});

test('an entry recorded while a run is fetching goes with the next run, which follows at once', async () => {
  const station = await makeStation();
  let recorded: Promise<unknown> | undefined;
  const { begin } = start(station, {
    ...working,
    [PULL]: () => {
      recorded ??= recordOperation(station, relocated(uuidv7()));
      return pullAnswer();
    },
  });
  begin();
  await vi.waitFor(() => expect(recorded).toBeDefined());
  await recorded;
  await vi.waitFor(async () => expect((await readQueue(station)).waiting).toEqual([]));
});

test('the network or the page coming back starts a run, and so does the timer', async () => {
  const { server, begin, wake, timers } = start(await makeStation(), working);
  const sync = begin();
  await sync.sendNow();
  const runs = () => server.calls.filter(({ path }) => path === PULL).length;
  const before = runs();
  wake();
  await vi.waitFor(() => expect(runs()).toBe(before + 1));
  await vi.waitFor(() => expect(timers).toHaveLength(1));
  timers[0]?.run();
  await vi.waitFor(() => expect(runs()).toBe(before + 2));
});

test('without a network it asks nothing and tries again later', async () => {
  const { server, begin, around, timers } = start(await makeStation(), working);
  around.online = false;
  const sync = begin();
  await sync.sendNow();
  expect(server.calls).toEqual([]);
  expect(sync.state.getSnapshot().phase).toBe('offline');
  expect(timers).toHaveLength(1);
});

test('while another tab is at it, this one waits its turn', async () => {
  const { server, begin, around, timers } = start(await makeStation(), working);
  around.held(true);
  const sync = begin();
  await sync.sendNow();
  expect(server.calls).toEqual([]);
  expect(sync.state.getSnapshot().phase).toBe('idle');
  expect(timers).toHaveLength(1);
});

test('Retry-After holds every trigger back but the button, and ends when the clock is set back in between', async () => {
  let now = START;
  const busy = () => new Response('', { status: 503, headers: { 'retry-after': '120' } });
  const { server, begin, wake, timers } = start(await makeStation(), { [PULL]: busy }, () => now);
  const sync = begin();
  await sync.sendNow();
  await vi.waitFor(() => expect(timers).toHaveLength(1));
  expect(sync.state.getSnapshot()).toMatchObject({ phase: 'failed', nextTry: '2026-11-30T08:02:02.500Z' });
  expect(timers[0]?.ms).toBe(122_500);
  const asked = server.calls.length;
  wake();
  await letItShow();
  expect(server.calls.length).toBe(asked);
  await sync.sendNow();
  expect(server.calls.length).toBe(asked + 1);
  now = new Date(START.getTime() - 365 * 86_400_000);
  timers[0]?.run();
  await vi.waitFor(() => expect(server.calls.length).toBe(asked + 2));
});

test('an error of the device’s own store is told, and the loop goes on', async () => {
  const row = { table: 'buckets', id: uuidv7(), row: { code: 5 } };
  const answers = { [PULL]: (_: Call, n: number) => pullAnswer(n === 0 ? { changes: [row] } : {}) };
  const { begin, timers } = start(await makeStation(), answers);
  const sync = begin();
  await vi.waitFor(() => expect(sync.state.getSnapshot().phase).toBe('failed'));
  expect(sync.state.getSnapshot().problem).toContain('This device');
  await vi.waitFor(() => expect(timers).toHaveLength(1));
  timers[0]?.run();
  await vi.waitFor(() => expect(sync.state.getSnapshot().phase).toBe('idle'));
  expect(sync.state.getSnapshot().problem).toBeUndefined();
});

test('signed out is told as that, with the queue kept', async () => {
  const station = await makeStation();
  await recordOperation(station, relocated(uuidv7()));
  const { begin } = start(station, { [PUSH]: () => new Response('', { status: 401 }), '/api/auth/renew': offline });
  const sync = begin();
  await sync.sendNow();
  expect(sync.state.getSnapshot().phase).toBe('signed-out');
  expect((await readQueue(station)).waiting).toHaveLength(1);
});

test('a stopped loop asks nothing more', async () => {
  const station = await makeStation();
  const { server, begin, wake, timers } = start(station, working);
  const sync = begin();
  await sync.sendNow();
  sync.stop();
  const asked = server.calls.length;
  wake();
  await sync.sendNow();
  await recordOperation(station, relocated(uuidv7()));
  await letItShow();
  expect(server.calls.length).toBe(asked);
  expect(timers).toEqual([]);
});

/** Long enough for a run that should not happen to show. */
async function letItShow(): Promise<void> {
  await new Promise((resolve) => setTimeout(resolve, 50));
}

test('a connection to the database that is lost in the middle of a run is opened again, and the run ends well', async () => {
  const station = await makeStation();
  await recordOperation(station, relocated(uuidv7()));
  const waiting = station.outbox.ops.where.bind(station.outbox.ops);
  let lost = 0;
  Object.assign(station.outbox.ops, {
    where: (...words: Parameters<typeof waiting>) => {
      if (++lost === 1) throw new DOMException('Connection to Indexed Database server lost.', 'UnknownError');
      return waiting(...words);
    },
  });
  const { begin } = start(station, working);
  const sync = begin();
  await sync.sendNow();
  expect(sync.state.getSnapshot().phase).toBe('idle');
  expect((await readQueue(station)).waiting).toEqual([]);
});
