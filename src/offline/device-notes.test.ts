import { expect, test } from 'vitest';
import { makeBrowser, makeSignIn, makeStation, START } from '#tests/support/station.ts';
import { dismissNote, isKept, readDeviceNotes } from './device-notes.ts';
import { requestSignIn } from './request-sign-in.ts';

const lost = {
  installId: '019ad000-0000-7000-8000-000000000002',
  sentUpTo: 4,
  missing: [3, 5],
  missingCount: 2,
  lastContact: START.toISOString(),
};

test('what the server says is lost stays until somebody has read it', async () => {
  const browser = makeBrowser();
  const answer = { ...(await makeSignIn()), lost: [lost] };
  const deps = {
    ...browser,
    post: async () => Response.json(answer),
    randomId: () => lost.installId,
    persist: async () => true,
  };
  const result = await requestSignIn({ email: 'mixer@shop.example', password: 'six green tubs' }, deps);
  if (!result.ok) throw new Error(result.problem);
  expect((await readDeviceNotes(result.station)).lost).toEqual([lost]);
  await dismissNote(result.station, 'lost');
  expect((await readDeviceNotes(result.station)).lost).toEqual([]);
});

test('a shop that has to be fetched again from the beginning counts as cleared for room, a first load does not', async () => {
  const station = await makeStation();
  const put = (completeAt: string | null) =>
    station.cache.meta.put({ name: 'position', cursor: '', seq: 3, completeAt });
  expect((await readDeviceNotes(station)).wasFull).toBe(false);
  await put(null);
  expect((await readDeviceNotes(station)).wasFull).toBe(false);
  await put(START.toISOString());
  expect((await readDeviceNotes(station)).wasFull).toBe(true);
});

test('a browser that does not tell whether it keeps anything is not taken for one that does not', async () => {
  expect(await isKept(undefined)).toBeUndefined();
});
