import { expect, test } from 'vitest';
import { makeProblem } from '#contract/problem.ts';
import { makeBrowser, makeSignIn, makeStation } from '#tests/support/station.ts';
import { requestSignIn } from './request-sign-in.ts';
import { openStation } from './station.ts';

const credentials = { email: 'mixer@shop.example', password: 'six green tubs' };

function depsWith(post: typeof fetch, browser = makeBrowser()) {
  return { post, ...browser, randomId: () => '019ad000-0000-7000-8000-000000000001', persist: async () => true };
}

test('a right password gives a station that opens without a network', async () => {
  const browser = makeBrowser();
  const answer = await makeSignIn();
  const result = await requestSignIn(
    credentials,
    depsWith(async () => Response.json(answer), browser),
  );
  expect(result).toMatchObject({ ok: true, station: { installId: answer.install.id } });
  expect((await openStation(browser))?.person.id).toBe(answer.person.id);
});

test('the installs that are whole are offered, one whose outbox was cleared is not', async () => {
  const browser = makeBrowser();
  const whole = await makeStation({}, browser);
  const cleared = await makeStation({}, browser);
  await cleared.outbox.delete();
  const sent: unknown[] = [];
  const post: typeof fetch = async (_, init) => {
    sent.push(JSON.parse(String(init?.body)));
    return Response.json(await makeSignIn());
  };
  await requestSignIn(credentials, depsWith(post, browser));
  expect(sent).toEqual([
    { ...credentials, installIds: [whole.installId], newInstallId: '019ad000-0000-7000-8000-000000000001' },
  ]);
});

test('a wrong password is told in the words of the server', async () => {
  const problem = makeProblem(401, 'wrong-sign-in', 'Not signed in', 'E-mail or password is wrong. Try again.');
  const result = await requestSignIn(
    credentials,
    depsWith(async () => Response.json(problem, { status: 401 })),
  );
  expect(result).toEqual({ ok: false, problem: 'E-mail or password is wrong. Try again.' });
});

test('no network is told as that', async () => {
  const result = await requestSignIn(
    credentials,
    depsWith(() => Promise.reject(new TypeError('failed'))),
  );
  expect(result).toEqual({ ok: false, problem: 'No network. The first sign-in needs one.' });
});

test.each([
  ['a portal’s page', new Response('<h1>Welcome</h1>', { headers: { 'content-type': 'text/html' } })],
  ['a broken server', new Response('oops', { status: 502 })],
  ['an answer that was cut off', new Response('{"shop":', { headers: { 'content-type': 'application/json' } })],
])('%s signs nobody in', async (_, response) => {
  const browser = makeBrowser();
  const result = await requestSignIn(
    credentials,
    depsWith(async () => response, browser),
  );
  expect(result).toEqual({ ok: false, problem: 'The server did not answer properly. Try again.' });
  expect(await openStation(browser)).toBeUndefined();
});

test('an answer whose grant does not verify signs nobody in', async () => {
  const answer = await makeSignIn({ grant: { header: { typ: 'JWT' } } });
  const result = await requestSignIn(
    credentials,
    depsWith(async () => Response.json(answer)),
  );
  expect(result).toMatchObject({ ok: false, problem: expect.stringContaining('key') });
});

test('a browser that declines to keep data does not stop the sign-in', async () => {
  const answer = await makeSignIn();
  const deps = { ...depsWith(async () => Response.json(answer)), persist: () => Promise.reject(new Error('no')) };
  expect(await requestSignIn(credentials, deps)).toMatchObject({ ok: true });
});
