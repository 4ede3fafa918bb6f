import type { ShiftSpan } from '#domain/shift-summary.ts';

export type ShiftChoice = 'today' | 'yesterday' | 'twelve-hours' | 'other';
export const SHIFT_CHOICES = [
  { value: 'today', name: 'Today' },
  { value: 'yesterday', name: 'Yesterday' },
  { value: 'twelve-hours', name: 'Last 12 hours' },
  { value: 'other', name: 'Other times' },
] as const satisfies readonly { value: ShiftChoice; name: string }[];

const MINUTE = 60_000;
const DAY = 24 * 60 * MINUTE;

/** The time in question on the device's wall clock; one that goes on ends with the next full minute. */
export function spanOf(choice: Exclude<ShiftChoice, 'other'>, now: Date): ShiftSpan {
  const midnight = (daysAgo: number) => new Date(now.getFullYear(), now.getMonth(), now.getDate() - daysAgo).getTime();
  const soon = (Math.floor(now.getTime() / MINUTE) + 1) * MINUTE;
  if (choice === 'today') return { fromMs: midnight(0), toMs: soon };
  if (choice === 'yesterday') return { fromMs: midnight(1), toMs: midnight(0) };
  return { fromMs: soon - DAY / 2, toMs: soon };
}

/** Two fields of local date and time as they were typed. */
export interface TypedSpan {
  from: string;
  to: string;
}

/** NaN where a field is empty. */
export function readTyped({ from, to }: TypedSpan): ShiftSpan {
  return { fromMs: new Date(from).getTime(), toMs: new Date(to).getTime() };
}

/** As such fields want it: 2026-12-01T06:00. */
export function toTyped({ fromMs, toMs }: ShiftSpan): TypedSpan {
  return { from: toField(new Date(fromMs)), to: toField(new Date(toMs)) };
}

function toField(at: Date): string {
  const two = (value: number) => String(value).padStart(2, '0');
  const day = `${at.getFullYear()}-${two(at.getMonth() + 1)}-${two(at.getDate())}`;
  return `${day}T${two(at.getHours())}:${two(at.getMinutes())}`;
}

/** Sent entries are kept for 14 days: what was discarded before is not known here any more. */
export function isBeyondMemory({ fromMs }: ShiftSpan, now: Date): boolean {
  return fromMs < now.getTime() - 14 * DAY;
}

/** A whole day as its date; else Tue 1 Dec 2026, 06:00 to 14:33, both days where they differ. */
export function describeSpan({ fromMs, toMs }: ShiftSpan, locale: string): string {
  const dayFormat = new Intl.DateTimeFormat(locale, {
    weekday: 'short',
    day: 'numeric',
    month: 'short',
    year: 'numeric',
  });
  const clockFormat = new Intl.DateTimeFormat(locale, { hour: '2-digit', minute: '2-digit' });
  const [day, clock] = [(ms: number) => dayFormat.format(ms), (ms: number) => clockFormat.format(ms)];
  const next = new Date(fromMs);
  next.setDate(next.getDate() + 1);
  const isMidnight = new Date(fromMs).getHours() + new Date(fromMs).getMinutes() === 0;
  if (isMidnight && next.getTime() === toMs) return day(fromMs);
  const sameDay = new Date(fromMs).toDateString() === new Date(toMs).toDateString();
  return `${day(fromMs)}, ${clock(fromMs)} to ${sameDay ? '' : `${day(toMs)}, `}${clock(toMs)}`;
}
