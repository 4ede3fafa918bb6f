/** Cancels what was asked for. */
export type Cancel = () => void;

interface Due {
  at: number;
  /** Breaks ties, so that the order never depends on who came first. */
  order: string;
  run: () => void;
}

/** Real milliseconds without a step after which it is asked whether everybody waits for a lock of the database. */
const STUCK_MS = 250;

/**
 * Time that moves only when everything that runs has come to rest: it sleeps here, waits for a lock of the database, or
 * has ended. What happens next is then a function of the seed, however quick the machine is.
 */
export class VirtualTime {
  private due: Due[] = [];
  private active = 0;
  private settled: (() => void) | undefined;

  constructor(
    private at: number,
    private readonly allWaitForLocks: () => Promise<boolean>,
  ) {}

  readonly now = (): number => this.at;

  /** Starts something at a later time. @param ms from now on */
  after(ms: number, order: string, run: () => Promise<void> | void): Cancel {
    const due = { at: this.at + Math.max(0, ms), order, run: () => this.start(async () => run()) };
    this.due.push(due);
    return () => {
      this.due = this.due.filter((other) => other !== due);
    };
  }

  /** Runs beside the others; time stands still until it rests. */
  start(run: () => Promise<void>): void {
    this.active += 1;
    void run().finally(() => this.rest());
  }

  /** Called by something that runs: it rests until then. */
  sleep(ms: number, order: string): Promise<void> {
    return new Promise((resolve) => {
      this.due.push({
        at: this.at + Math.max(0, ms),
        order,
        run: () => {
          this.active += 1;
          resolve();
        },
      });
      this.rest();
    });
  }

  /** What runs now waits for something that another one will give. */
  rest(): void {
    this.active -= 1;
    if (this.active === 0) this.settled?.();
  }

  /** It got what it waited for. */
  resume(): void {
    this.active += 1;
  }

  /** Steps from one due time to the next, up to `end`. @param end ms since 1970 */
  async runUntil(end: number): Promise<void> {
    for (;;) {
      await this.quiet();
      const next = this.takeNext(end);
      if (next === undefined) break;
      this.at = Math.max(this.at, next.at);
      next.run();
    }
    this.at = Math.max(this.at, end);
  }

  private takeNext(end: number): Due | undefined {
    let next: Due | undefined;
    for (const due of this.due) if (next === undefined || isBefore(due, next)) next = due;
    if (next === undefined || next.at > end) return undefined;
    this.due.splice(this.due.indexOf(next), 1);
    return next;
  }

  /** A turn of the event loop more: whoever awaited the last one may go on. */
  private async quiet(): Promise<void> {
    for (;;) {
      await new Promise((resolve) => setImmediate(resolve));
      if (this.active === 0) {
        await new Promise((resolve) => setImmediate(resolve));
        if (this.active === 0) return;
      }
      const timer = new Promise<'late'>((resolve) => setTimeout(resolve, STUCK_MS, 'late'));
      const rest = new Promise<'rest'>((resolve) => (this.settled = () => resolve('rest')));
      if (this.active > 0 && (await Promise.race([rest, timer])) === 'late' && (await this.allWaitForLocks())) return;
    }
  }
}

function isBefore(a: Due, b: Due): boolean {
  return a.at < b.at || (a.at === b.at && a.order < b.order);
}
