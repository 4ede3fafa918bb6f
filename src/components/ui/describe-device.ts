import type { LostInstall } from '#contract/station-report.ts';
import { formatClock, formatDay } from './format-time.ts';

/** What may be lost, in the words of whoever was at the scale. */
export function describeLost(lost: LostInstall, locale: string): string {
  const came =
    lost.sentUpTo === 0 ? 'Nothing recorded here had been sent.' : `Sent up to number ${lost.sentUpTo} is safe.`;
  const gone =
    lost.missingCount === 0
      ? ''
      : ` ${lost.missingCount === 1 ? 'Number' : 'Numbers'} ${listNumbers(lost)} never arrived.`;
  const since =
    lost.lastContact === null
      ? ''
      : ` What was recorded after ${formatDay(lost.lastContact, locale)} ${formatClock(lost.lastContact, locale)} may be lost too.`;
  return `This browser cleared what it kept on this device. ${came}${gone}${since} Weigh those tubs again and tell a manager.`;
}

/** 3, 5–7 and 9; with what is not listed counted. */
export function listNumbers({ missing, missingCount }: Pick<LostInstall, 'missing' | 'missingCount'>): string {
  const runs: [number, number][] = [];
  for (const n of missing) {
    const last = runs.at(-1);
    if (last !== undefined && last[1] === n - 1) last[1] = n;
    else runs.push([n, n]);
  }
  const words = runs.map(([from, to]) => (from === to ? `${from}` : `${from}–${to}`));
  if (missingCount > missing.length) words.push(`${missingCount - missing.length} more`);
  const end = words.pop() ?? '';
  return words.length === 0 ? end : `${words.join(', ')} and ${end}`;
}

export function describeJump({ at, jumpMs }: { at: string; jumpMs: number }, locale: string): string {
  const way = jumpMs > 0 ? 'ahead' : 'back';
  return `This device's clock went ${describeSpan(Math.abs(jumpMs))} ${way} before ${formatClock(at, locale)}. Logs keep both times, and a manager is told. Set the clock to automatic.`;
}

function describeSpan(ms: number): string {
  const minutes = Math.round(ms / 60_000);
  if (minutes < 120) return `${minutes} minutes`;
  const hours = Math.round(minutes / 60);
  return hours < 48 ? `${hours} hours` : `${Math.round(hours / 24)} days`;
}
