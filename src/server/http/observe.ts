import { Counter, Gauge, Histogram, Registry, collectDefaultMetrics } from 'prom-client';
import { log } from './log.ts';

/** Of this process; labels name routes and statuses, never a shop, a person or a station. */
export const metrics = new Registry();
collectDefaultMetrics({ register: metrics });

const requests = new Histogram({
  name: 'halfpail_request_seconds',
  help: 'Seconds from the first byte of an API request to its answer.',
  labelNames: ['route', 'status'],
  buckets: [0.005, 0.02, 0.05, 0.1, 0.25, 0.5, 1, 2.5, 5, 10, 30],
  registers: [metrics],
});
const waiting = new Gauge({
  name: 'halfpail_requests_waiting',
  help: 'API requests that wait for their turn.',
  registers: [metrics],
});
const operations = new Counter({
  name: 'halfpail_pushed_operations_total',
  help: 'Operations that stations sent, by what became of them.',
  labelNames: ['outcome'],
  registers: [metrics],
});

interface Seen {
  request: Request;
  url: URL;
  /** The route's pattern, not the address: ids stay out of it. */
  routePattern: string;
  locals: App.Locals;
}

/** One line and one observation a request: route, status, time, shop and station; no body, no cookie, no address. */
export function observe(seen: Seen, status: number, ms: number, load: { waiting: number }): void {
  const route = `${seen.request.method} ${status === 404 ? 'unknown' : seen.routePattern}`;
  requests.observe({ route, status }, ms / 1000);
  waiting.set(load.waiting);
  const { station } = seen.locals;
  log.info({ route, status, ms: Math.round(ms), shop: station?.shopId, station: station?.stationId }, 'request');
}

export function countOutcomes(outcomes: readonly { outcome: string }[]): void {
  for (const { outcome } of outcomes) operations.inc({ outcome });
}
