import type { Search } from './fold-in-candidates.ts';
import type { Relaxed } from './fold-in-relaxation.ts';
import type { Decision, Decisions, Fresh } from './fold-in-rows.ts';
import { WHOLE } from './mass.ts';

const EPSILON = 1e-3;

/** The ways on from a relaxation that is not yet a plan: of a bucket, else of a component; none when it is one. */
export function branch(search: Search, relaxed: Relaxed): Decisions[] {
  const { decisions } = relaxed.certificate;
  const n = undecidedBucket(search, relaxed);
  if (n !== -1) {
    const candidate = search.candidates[n];
    const ways: Decision[] = ['closed'];
    if (candidate?.canEmpty) ways.push('emptied');
    if (candidate && candidate.most >= search.minimum) ways.push('partial');
    return ways.map((way) => ({ ...decisions, buckets: replaced(decisions.buckets, n, way) }));
  }
  const j = undecidedFresh(search, relaxed);
  if (j === -1) return [];
  return (['none', 'some'] as const).map((way) => ({ ...decisions, fresh: replaced(decisions.fresh, j, way) }));
}

export function replaced<T>(list: readonly T[], at: number, by: T): T[] {
  return list.map((entry, n) => (n === at ? by : entry));
}

/** A candidate that is taken in part although that is not settled; the one farthest from 0 and from all. */
function undecidedBucket(search: Search, { certificate, taken }: Relaxed): number {
  let at = -1;
  let most = 0;
  search.candidates.forEach(({ canEmpty, usable, most: upper }, n) => {
    if (certificate.decisions.buckets[n] !== 'free') return;
    const all = canEmpty ? usable : upper;
    const mass = taken[n] as number;
    if (mass < EPSILON || mass > all - EPSILON) return;
    const open = Math.min(mass, all - mass);
    if (open > most) {
      most = open;
      at = n;
    }
  });
  return at;
}

/** A component whose fresh ink would be more than nothing and too little to weigh; −1 when a filling exists. */
export function undecidedFresh(
  search: Search,
  relaxed: Pick<Relaxed, 'certificate' | 'held' | 'batch' | 'taken'>,
): number {
  const { fresh } = relaxed.certificate.decisions;
  const reused = relaxed.taken.reduce((sum, mass) => sum + mass, 0);
  const windows = search.components.map((_, j) => windowOf(search, fresh[j], relaxed, j));
  const between = farthest(windows, ({ low, high, least }) =>
    low > EPSILON && high < least - EPSILON ? Math.min(low, least - high) : 0,
  );
  if (between !== -1) return between;
  const room = relaxed.batch - reused;
  const needed = windows.reduce((sum, { low, least }) => sum + (low > EPSILON ? Math.max(low, least) : 0), 0);
  if (needed > room + EPSILON)
    return farthest(windows, ({ low, least }) => (low > EPSILON ? Math.max(0, least - low) : 0));
  const possible = windows.reduce((sum, { high, least }) => sum + (high >= least - EPSILON ? Math.max(0, high) : 0), 0);
  if (possible < room - EPSILON) return farthest(windows, ({ high, least }) => (high < least ? high : 0));
  return -1;
}

interface FreshWindow {
  low: number;
  high: number;
  least: number;
}

function windowOf(
  search: Search,
  decision: Fresh | undefined,
  { held, batch }: Pick<Relaxed, 'held' | 'batch'>,
  j: number,
): FreshWindow {
  if (decision === 'none' || search.target[j] === 0) return { low: 0, high: 0, least: 0 };
  const edge = (ppb: Float64Array) => (batch * (ppb[j] as number)) / WHOLE - (held[j] as number);
  const least = search.leastFresh[j] as number;
  if (decision === 'some') return { low: Math.max(least, edge(search.lower)), high: edge(search.upper), least: 0 };
  return { low: edge(search.lower), high: edge(search.upper), least };
}

function farthest(windows: readonly FreshWindow[], by: (window: FreshWindow) => number): number {
  let at = -1;
  let most = EPSILON;
  windows.forEach((window, j) => {
    const distance = by(window);
    if (distance > most) {
      most = distance;
      at = j;
    }
  });
  return at;
}
