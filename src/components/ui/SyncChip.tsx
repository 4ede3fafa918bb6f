import { formatClock } from './format-time.ts';
import { useStation } from './station-context.ts';
import { useQueue } from './use-queue.ts';
import { useSyncState } from './use-sync-state.ts';

/** Where the logs are, in one calm line; it leads to the Shift page. */
export function SyncChip() {
  const { station } = useStation();
  const state = useSyncState();
  const queue = useQueue();
  if (queue === undefined) return null;
  const chip = describeSync(state, queue.waiting.length, queue.rejected.length, station.shop.locale);
  return (
    <a className={`chip ${chip.glyph}`} href="/shift" role="status">
      {chip.text}
    </a>
  );
}

function describeSync(
  state: ReturnType<typeof useSyncState>,
  waiting: number,
  rejected: number,
  locale: string,
): { glyph: string; text: string } {
  if (rejected > 0) return { glyph: 'g-two', text: `Needs a decision · ${rejected}` };
  if (state.phase === 'sending' && waiting > 0) return { glyph: 'g-send', text: `Sending ${waiting}` };
  if (state.phase === 'signed-out')
    return { glyph: 'g-ask', text: waiting > 0 ? `Sign in to send ${waiting}` : 'Sign in' };
  if (waiting > 0) return { glyph: 'g-device', text: `On this device · ${waiting}` };
  if (state.phase === 'offline') return { glyph: 'g-off', text: 'No signal' };
  if (state.phase === 'failed') {
    return {
      glyph: 'g-clock',
      text: state.nextTry === null ? 'Tries again' : `Tries again ${formatClock(state.nextTry, locale)}`,
    };
  }
  if (state.lastSent === null) return { glyph: 'g-ok', text: 'All sent' };
  return { glyph: 'g-ok', text: `All sent ${formatClock(state.lastSent, locale)}` };
}
