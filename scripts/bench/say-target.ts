import { median, quantile } from './quantile.ts';

/** ms, the least of three turns: other programs that are given the processor in between do not count. */
export function timeOf(ask: () => unknown): number {
  const turns = [1, 2, 3].map(() => {
    const started = performance.now();
    ask();
    return performance.now() - started;
  });
  return Math.min(...turns);
}

/** One line: p50 and p95 of times in ms, and whether p95 is within its target. */
export function sayTimes(what: string, times: readonly number[], target: number): void {
  const p95 = quantile(times, 0.95);
  const verdict = p95 <= target ? 'met' : 'missed';
  console.log(`${what}: p50 ${digits(median(times))} ms, p95 ${digits(p95)} ms (target ${target} ms: ${verdict})`);
}

export function sayWhether(what: string, isMet: boolean): void {
  console.log(`${what}: ${isMet ? 'met' : 'missed'}`);
}

const digits = (ms: number) => ms.toPrecision(3);
