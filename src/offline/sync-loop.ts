import { v7 as uuidv7 } from 'uuid';
import { isDiskFull } from './disk-error.ts';
import { RecordError } from './record-error.ts';
import { reopening } from './reopening.ts';
import { isLoaded } from './shown.ts';
import { type Station, takeRenewedGrant } from './station.ts';
import { type Surroundings, syncLock, thisBrowser } from './surroundings.ts';
import { syncOnce } from './sync-once.ts';
import type { SyncDeps, SyncResult } from './sync-result.ts';
import { type SyncState, Watched } from './sync-state.ts';

export interface SyncHandle {
  state: Watched<SyncState>;
  sendNow: () => Promise<void>;
  stop: () => void;
}

const EVERY_MS = 30_000;
const JITTER_MS = 5_000;
/** A stalled exchange is given up, or it would hold the lock until the page closes. */
const STALLED_MS = 60_000;

const here: SyncDeps = {
  fetch: (input, init) => fetch(input, { ...init, signal: AbortSignal.timeout(STALLED_MS) }),
  now: () => new Date(),
  randomId: uuidv7,
};

/** Timing only: at start, online, visible, each half minute, after each entry, and by the button; one run at a time. */
export function startSync(station: Station, deps: SyncDeps = here, around: Surroundings = thisBrowser): SyncHandle {
  const state = new Watched<SyncState>({ phase: 'idle', loaded: null, lastSent: null, nextTry: null });
  let cancelTimer = () => {};
  let stopped = false;
  let running: Promise<void> | undefined;
  let askedAgain = false;
  /** Ends by a timer: the device's clock may be set back a year. */
  let held = false;

  const runUntilQuiet = async () => {
    do {
      askedAgain = false;
      cancelTimer();
      const result = await around.alone(syncLock(station.installId), () => runOnce(station, deps, around, state));
      if (stopped) break;
      const wait = waitAfter(result, around);
      held = result?.kind === 'failed' && result.retryAfterMs !== null;
      cancelTimer = around.after(wait, () => {
        held = false;
        wake();
      });
      if (result !== undefined) state.set(describe(state.getSnapshot(), result, deps.now(), wait));
    } while (askedAgain && !held);
    running = undefined;
  };
  const sendNow = (): Promise<void> => {
    if (stopped) return Promise.resolve();
    if (running !== undefined) askedAgain = true;
    return (running ??= runUntilQuiet());
  };
  const wake = () => {
    if (!held) void sendNow();
  };
  const recorded = function (this: { onsuccess?: unknown }) {
    this.onsuccess = () => around.soon(wake);
  };
  const sleep = around.onWake(wake);
  station.outbox.ops.hook('creating', recorded);
  void sendNow();
  return {
    state,
    sendNow,
    stop: () => {
      stopped = true;
      cancelTimer();
      sleep();
      station.outbox.ops.hook('creating').unsubscribe(recorded);
    },
  };
}

/** Never throws: whatever goes wrong on this device is told and tried again. */
async function runOnce(
  station: Station,
  deps: SyncDeps,
  around: Surroundings,
  state: Watched<SyncState>,
): Promise<SyncResult> {
  if (!around.isOnline()) return { kind: 'offline' };
  try {
    return await reopening([station.outbox, station.cache], async () => {
      await takeRenewedGrant(station, deps.now());
      const loaded = await isLoaded(station);
      state.set({ ...state.getSnapshot(), phase: loaded ? 'sending' : 'loading' });
      return syncOnce(station, deps, (progress) => state.set({ ...state.getSnapshot(), loaded: progress }));
    });
  } catch (error) {
    return { kind: 'failed', problem: whyNotKept(error), retryAfterMs: null };
  }
}

function whyNotKept(error: unknown): string {
  if (error instanceof RecordError) return error.message;
  if (isDiskFull(error)) return 'This device is full. Delete something else on it; what was recorded is safe.';
  return `This device could not keep what came: ${error instanceof Error ? error.message : String(error)}`;
}

function waitAfter(result: SyncResult | undefined, around: Surroundings): number {
  const asked = result?.kind === 'failed' ? result.retryAfterMs : null;
  return (asked ?? EVERY_MS) + around.jitter() * JITTER_MS;
}

function describe(before: SyncState, result: SyncResult, now: Date, waitMs: number): SyncState {
  const nextTry = new Date(now.getTime() + waitMs).toISOString();
  const { problem: _, ...kept } = before;
  if (result.kind === 'done') return { ...kept, phase: 'idle', lastSent: now.toISOString(), nextTry };
  if ('problem' in result) return { ...kept, phase: 'failed', problem: result.problem, nextTry };
  return { ...kept, phase: result.kind, nextTry };
}
