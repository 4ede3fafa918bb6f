import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { Gate } from './gate.ts';

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

const anybody = { name: 'anybody', most: 10 };

/** Work that ends when it is told to. */
function held() {
  let end = () => {};
  const done = new Promise<void>((resolve) => (end = resolve));
  return { work: () => done, end };
}

test('lets so many in at once and the others one after another', async () => {
  const gate = new Gate({ most: 2, waiting: 5, patienceMs: 1000 });
  const all = [held(), held(), held()];
  const passed = all.map(({ work }) => gate.pass(anybody, work));
  expect(gate.load).toEqual({ inside: 2, waiting: 1 });
  all[0]?.end();
  await passed[0];
  expect(gate.load).toEqual({ inside: 2, waiting: 0 });
  for (const { end } of all) end();
  await Promise.all(passed);
  expect(gate.load).toEqual({ inside: 0, waiting: 0 });
});

test('turns away whom it cannot let wait, and says when to come again', async () => {
  const gate = new Gate({ most: 1, waiting: 1, patienceMs: 1000 });
  const [first, second] = [held(), held()];
  const passed = [gate.pass(anybody, first.work), gate.pass(anybody, second.work)];
  await expect(gate.pass(anybody, async () => {})).rejects.toMatchObject({
    problem: { status: 503, code: 'busy' },
    headers: { 'Retry-After': expect.stringMatching(/^[2-7]$/) },
  });
  first.end();
  second.end();
  await Promise.all(passed);
});

test('does not let anybody wait for ever, and work that fails makes room', async () => {
  const gate = new Gate({ most: 1, waiting: 5, patienceMs: 1000 });
  const first = held();
  const passed = gate.pass(anybody, first.work);
  const late = gate.pass(anybody, async () => 'late');
  const turned = late.catch((error: unknown) => error);
  await vi.advanceTimersByTimeAsync(1001);
  expect(await turned).toMatchObject({ problem: { code: 'busy' } });
  first.end();
  await passed;
  await expect(gate.pass(anybody, () => Promise.reject(new Error('broken')))).rejects.toThrow('broken');
  expect(await gate.pass(anybody, async () => 'next')).toBe('next');
});

test('lets only so many of one party in, and those behind them who may', async () => {
  const gate = new Gate({ most: 3, waiting: 5, patienceMs: 1000 });
  const shop = { name: 'a shop that pushes', most: 1 };
  const [first, second, other] = [held(), held(), held()];
  const order: string[] = [];
  const passed = [
    gate.pass(shop, first.work).then(() => order.push('first')),
    gate.pass(shop, second.work).then(() => order.push('second')),
    gate.pass(anybody, other.work).then(() => order.push('other')),
  ];
  expect(gate.load).toEqual({ inside: 2, waiting: 1 });
  other.end();
  await passed[2];
  expect(gate.load).toEqual({ inside: 1, waiting: 1 });
  first.end();
  await passed[0];
  expect(gate.load).toEqual({ inside: 1, waiting: 0 });
  second.end();
  await passed[1];
  expect(order).toEqual(['other', 'first', 'second']);
});
