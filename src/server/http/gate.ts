import { HttpProblem } from './http-problem.ts';

/** Lets so many requests in at once; others wait their turn, not too many and not for ever. A courtesy of one process. */
export class Gate {
  private inside = 0;
  private readonly waiting: (() => void)[] = [];
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
    return { inside: this.inside, waiting: this.waiting.length };
  }

  /** @throws HttpProblem 503 with Retry-After when too many wait already, or this one has waited long enough */
  async pass<T>(work: () => Promise<T>): Promise<T> {
    await this.enter();
    try {
      return await work();
    } finally {
      const next = this.waiting.shift();
      if (next === undefined) this.inside -= 1;
      else next();
    }
  }

  private enter(): Promise<void> {
    if (this.inside < this.most) {
      this.inside += 1;
      return Promise.resolve();
    }
    if (this.waiting.length >= this.mostWaiting) return Promise.reject(busy());
    return new Promise((resolve, reject) => {
      const mine = () => {
        clearTimeout(timer);
        resolve();
      };
      const timer = setTimeout(() => {
        this.waiting.splice(this.waiting.indexOf(mine), 1);
        reject(busy());
      }, this.patienceMs);
      this.waiting.push(mine);
    });
  }
}

/** Come again: nothing was begun. */
export function busy(): HttpProblem {
  const spread = 2 + Math.floor(Math.random() * 6);
  return new HttpProblem(503, 'busy', 'Busy', 'The server is busy. It is tried again by itself.', {
    'Retry-After': String(spread),
  });
}
