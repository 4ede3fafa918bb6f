/** What starts and bounds a run of the sync, apart from its timetable. */
export interface Surroundings {
  isOnline: () => boolean;
  /** Calls when the network or the page comes back. @returns stops listening */
  onWake: (run: () => void) => () => void;
  /** Runs alone in all tabs of this browser; undefined when another tab is at it. */
  alone: <T>(name: string, run: () => Promise<T>) => Promise<T | undefined>;
  /** @returns cancels */
  after: (ms: number, run: () => void) => () => void;
  /** After what runs now, and never inside a transaction of its. */
  soon: (run: () => void) => void;
  /** 0 to 1 */
  jitter: () => number;
}

export const thisBrowser: Surroundings = {
  isOnline: () => navigator.onLine,
  onWake: (run) => {
    const visible = () => {
      if (document.visibilityState === 'visible') run();
    };
    window.addEventListener('online', run);
    document.addEventListener('visibilitychange', visible);
    return () => {
      window.removeEventListener('online', run);
      document.removeEventListener('visibilitychange', visible);
    };
  },
  alone: async (name, run) =>
    navigator.locks.request(name, { ifAvailable: true }, async (lock) => (lock === null ? undefined : run())),
  after: (ms, run) => {
    const timer = setTimeout(run, ms);
    return () => clearTimeout(timer);
  },
  soon: (run) => void setTimeout(run, 0),
  jitter: Math.random,
};

export function syncLock(installId: string): string {
  return `halfpail-sync-${installId}`;
}
