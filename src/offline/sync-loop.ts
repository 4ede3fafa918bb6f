import { v7 as uuidv7 } from 'uuid';
import { isLoaded } from './shown.ts';
import type { Station } from './station.ts';
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

const here: SyncDeps = { fetch: (input, init) => fetch(input, init), now: () => new Date(), randomId: uuidv7 };

/** Timing only: at start, online, visible, each half minute, after each entry, and by the button; one run at a time. */
export function startSync(station: Station, deps: SyncDeps = here): SyncHandle {
  const state = new Watched<SyncState>({ phase: 'idle', loaded: null, lastSent: null, nextTry: null });
  let timer: ReturnType<typeof setTimeout> | undefined;
  let stopped = false;

  const run = async () => {
    if (stopped) return;
    clearTimeout(timer);
    const result = await underLock(station, () => runOnce(station, deps, state));
    if (stopped) return;
    const wait = waitAfter(result);
    timer = setTimeout(() => void run(), wait);
    if (result !== undefined) state.set(describe(state.getSnapshot(), result, deps.now(), wait));
  };
  const visible = () => {
    if (document.visibilityState === 'visible') void run();
  };
  const recorded = () => void run();
  window.addEventListener('online', recorded);
  document.addEventListener('visibilitychange', visible);
  station.outbox.ops.hook('creating', function () {
    this.onsuccess = () => setTimeout(recorded, 0);
  });
  void run();
  return {
    state,
    sendNow: run,
    stop: () => {
      stopped = true;
      clearTimeout(timer);
      window.removeEventListener('online', recorded);
      document.removeEventListener('visibilitychange', visible);
    },
  };
}

/** Undefined when another tab of this install is at it. */
async function underLock(station: Station, run: () => Promise<SyncResult>): Promise<SyncResult | undefined> {
  return await navigator.locks.request(`halfpail-sync-${station.installId}`, { ifAvailable: true }, async (lock) =>
    lock === null ? undefined : await run(),
  );
}

async function runOnce(station: Station, deps: SyncDeps, state: Watched<SyncState>): Promise<SyncResult> {
  if (!navigator.onLine) return { kind: 'offline' };
  const loaded = await isLoaded(station);
  state.set({ ...state.getSnapshot(), phase: loaded ? 'sending' : 'loading' });
  return syncOnce(station, deps, (progress) => state.set({ ...state.getSnapshot(), loaded: progress }));
}

function waitAfter(result: SyncResult | undefined): number {
  const jitter = Math.random() * JITTER_MS;
  return ((result?.kind === 'failed' && result.retryAfterMs) || EVERY_MS) + jitter;
}

function describe(before: SyncState, result: SyncResult, now: Date, waitMs: number): SyncState {
  const nextTry = new Date(now.getTime() + waitMs).toISOString();
  const { problem: _, ...kept } = before;
  if (result.kind === 'done') return { ...kept, phase: 'idle', lastSent: now.toISOString(), nextTry };
  if (result.kind === 'failed') return { ...kept, phase: 'failed', problem: result.problem, nextTry };
  return { ...kept, phase: result.kind, nextTry };
}
