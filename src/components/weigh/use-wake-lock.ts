import { useEffect } from 'react';

/** Keeps the screen awake while a batch is weighed; asked again whenever the page becomes visible. */
export function useWakeLock(): void {
  useEffect(() => {
    if (!('wakeLock' in navigator)) return;
    let lock: WakeLockSentinel | undefined;
    let ended = false;
    const ask = () => {
      if (document.visibilityState !== 'visible') return;
      navigator.wakeLock.request('screen').then(
        (granted) => {
          if (ended) void granted.release();
          else lock = granted;
        },
        () => {
          // A low battery refuses it; the weighing goes on all the same.
        },
      );
    };
    ask();
    document.addEventListener('visibilitychange', ask);
    return () => {
      ended = true;
      document.removeEventListener('visibilitychange', ask);
      void lock?.release();
    };
  }, []);
}
