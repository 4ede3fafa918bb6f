import type { LoadProgress } from './pull-changes.ts';

export interface SyncState {
  phase: 'idle' | 'loading' | 'sending' | 'offline' | 'signed-out' | 'failed';
  loaded: LoadProgress | null;
  /** ISO instants. */
  lastSent: string | null;
  nextTry: string | null;
  problem?: string;
}

/** A value that can be watched; fits React's useSyncExternalStore. */
export class Watched<T> {
  private readonly listeners = new Set<() => void>();
  private value: T;

  constructor(value: T) {
    this.value = value;
  }
  readonly getSnapshot = (): T => this.value;
  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };
  set(value: T): void {
    this.value = value;
    for (const listener of this.listeners) listener();
  }
}
