import { v7 as uuidv7 } from 'uuid';
import { problem } from '#contract/problem.ts';
import { type SignInResponse, signInResponse } from '#contract/sign-in.ts';
import { readInstalls } from './installs.ts';
import { findKey } from './outbox-keys.ts';
import { Outbox } from './outbox.ts';
import { SignInError, type Station, saveSignIn } from './station.ts';

export type SignInResult = { ok: true; station: Station } | { ok: false; problem: string };

interface Deps {
  post: typeof fetch;
  storage: Storage;
  randomId: () => string;
  now: () => Date;
  /** Asks the browser not to clear what lies on this device. */
  persist: () => Promise<unknown>;
}
const here = (): Deps => ({
  post: (input, init) => fetch(input, init),
  storage: localStorage,
  randomId: uuidv7,
  now: () => new Date(),
  persist: async () => navigator.storage?.persist?.(),
});

/** Signs in and keeps what opens the station again without a network; else a sentence that says what to do. */
export async function requestSignIn(
  credentials: { email: string; password: string },
  deps: Deps = here(),
): Promise<SignInResult> {
  const body = {
    ...credentials,
    installIds: await wholeInstalls(deps.storage),
    newInstallId: deps.randomId(),
  };
  const response = await deps
    .post('/api/auth/sign-in', {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
    })
    .catch(() => undefined);
  if (response === undefined) return { ok: false, problem: 'No network. The first sign-in needs one.' };
  const answer: unknown = await response.json().catch(() => undefined);
  const signedIn = signInResponse.safeParse(answer);
  if (response.ok && signedIn.success) {
    return keepStation(signedIn.data, deps);
  }
  const refused = problem.safeParse(answer);
  return {
    ok: false,
    problem: refused.success ? refused.data.detail : 'The server did not answer properly. Try again.',
  };
}

async function keepStation(response: SignInResponse, deps: Deps): Promise<SignInResult> {
  try {
    const station = await saveSignIn(response, deps);
    // A browser that declines changes nothing about the sign-in.
    await deps.persist().catch(() => undefined);
    return { ok: true, station };
  } catch (error) {
    const why =
      error instanceof SignInError
        ? error.message
        : 'This browser keeps nothing on the device. Leave private mode or free some space.';
    return { ok: false, problem: why };
  }
}

/** Installs whose outbox is still there; one that was cleared by the browser must not count its codes anew. */
async function wholeInstalls(storage: Storage): Promise<string[]> {
  const whole: string[] = [];
  for (const [shopId, installId] of Object.entries(readInstalls(storage).installs)) {
    const outbox = new Outbox(shopId, installId);
    if ((await findKey(outbox, 'codePrefix')) !== undefined) whole.push(installId);
    outbox.close();
  }
  return whole;
}
