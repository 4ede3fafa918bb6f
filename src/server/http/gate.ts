import { HttpProblem } from './http-problem.ts';

/** Those of which only `most` are inside together: the pushes of one shop wait for its counter one after another anyway. */
export interface Party {
  name: string;
  most: number;
}

interface Waiting {
  party: Party;
  enter: () => void;
}

/**
 * Lets so many requests in at once, and so many of one party; others wait their turn, not too many and not for ever. A
 * courtesy of one process: nothing that must be right depends on it.
 */
export class Gate {
  private readonly inside = new Map<string, number>();
  private readonly waiting: Waiting[] = [];
  private readonly most: number;
  private readonly mostWaiting: number;
  private readonly patienceMs: number;

  constructor(limits: { most: number; waiting: number; patienceMs: number }) {
    this.most = limits.most;
    this.mostWaiting = limits.waiting;
    this.patienceMs = limits.patienceMs;
  }

  /** How many are inside, and how many wait. */
  get load(): { inside: number; waiting: number } {
    let inside = 0;
    for (const count of this.inside.values()) inside += count;
    return { inside, waiting: this.waiting.length };
  }

  /** @throws HttpProblem 503 with Retry-After when too many wait already, or this one has waited long enough */
  async pass<T>(party: Party, work: () => Promise<T>): Promise<T> {
    await this.enter(party);
    try {
      return await work();
    } finally {
      this.count(party, -1);
      this.admitNext();
    }
  }

  private enter(party: Party): Promise<void> {
    if (this.hasRoom(party)) {
      this.count(party, 1);
      return Promise.resolve();
    }
    if (this.waiting.length >= this.mostWaiting) return Promise.reject(busy());
    return new Promise((resolve, reject) => {
      const mine: Waiting = {
        party,
        enter: () => {
          clearTimeout(timer);
          resolve();
        },
      };
      const timer = setTimeout(() => {
        this.waiting.splice(this.waiting.indexOf(mine), 1);
        reject(busy());
      }, this.patienceMs);
      this.waiting.push(mine);
    });
  }

  /** The first that may: one whose party is full does not hold up those behind it. */
  private admitNext(): void {
    const at = this.waiting.findIndex(({ party }) => this.hasRoom(party));
    const [next] = at < 0 ? [] : this.waiting.splice(at, 1);
    if (next === undefined) return;
    this.count(next.party, 1);
    next.enter();
  }

  private hasRoom({ name, most }: Party): boolean {
    return this.load.inside < this.most && (this.inside.get(name) ?? 0) < most;
  }

  private count({ name }: Party, change: 1 | -1): void {
    const count = (this.inside.get(name) ?? 0) + change;
    if (count === 0) this.inside.delete(name);
    else this.inside.set(name, count);
  }
}

/** Come again: nothing was begun. */
export function busy(): HttpProblem {
  const spread = 2 + Math.floor(Math.random() * 6);
  return new HttpProblem(503, 'busy', 'Busy', 'The server is busy. It is tried again by itself.', {
    'Retry-After': String(spread),
  });
}
