/** 14:32, in the shop's locale. */
export function formatClock(iso: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { hour: '2-digit', minute: '2-digit' }).format(new Date(iso));
}

/** 17 Nov 2026, in the shop's locale. */
export function formatDay(iso: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { day: 'numeric', month: 'short', year: 'numeric' }).format(new Date(iso));
}

/** Wed 07:00; "Today 15:30" on the same day. */
export function formatDue(iso: string, locale: string, now: Date): string {
  const due = new Date(iso);
  const day =
    due.toDateString() === now.toDateString()
      ? 'Today'
      : new Intl.DateTimeFormat(locale, { weekday: 'short' }).format(due);
  return `${day} ${formatClock(iso, locale)}`;
}

/** Whole days from `iso` to `now`; 0 on the first day. */
export function ageInDays(iso: string, now: Date): number {
  return Math.max(0, Math.floor((now.getTime() - new Date(iso).getTime()) / 86_400_000));
}
