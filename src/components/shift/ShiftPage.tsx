import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useQueue } from '#components/ui/use-queue.ts';
import { useStation } from '#components/ui/station-context.ts';
import { useSyncState } from '#components/ui/use-sync-state.ts';
import { Person } from './Person.tsx';
import { QueueList } from './QueueList.tsx';
import { Refused } from './Refused.tsx';
import { SoFar } from './SoFar.tsx';

/** What waits on this device, what needs a decision, and the shift so far. */
export function ShiftPage() {
  return (
    <StationRoot area="shift">
      <Shift />
    </StationRoot>
  );
}

function Shift() {
  const { sync } = useStation();
  const queue = useQueue();
  const state = useSyncState();
  if (queue === undefined) return null;
  const sending = state.phase === 'sending';
  return (
    <>
      <Top title="Shift">
        <SyncChip />
      </Top>
      <div className="shift-cols stack gap-4">
        <div className="stack gap-4">
          <section className="stack">
            <div className="two">
              <div>
                <span className="big" data-count="waiting">
                  {queue.waiting.length}
                </span>
                <span className="badge g-device">
                  {queue.waiting.length === 1 ? 'Waits to be sent' : 'Wait to be sent'}
                </span>
              </div>
              <div>
                <span className="big" data-count="decide">
                  {queue.rejected.length}
                </span>
                <span className="badge g-two">Need a decision</span>
              </div>
            </div>
            <button type="button" className="key wide" disabled={sending} onClick={() => void sync.sendNow()}>
              <span className="g g-send">{sending ? 'Sending' : 'Send now'}</span>
            </button>
            {state.phase === 'offline' ? <p className="ink2 g g-off">No signal. Keep working.</p> : null}
            {state.phase === 'signed-out' ? (
              <a className="key go wide" href="/sign-in?next=/shift">
                Sign in to send {queue.waiting.length} {queue.waiting.length === 1 ? 'log' : 'logs'}
              </a>
            ) : null}
            {state.phase === 'failed' && state.problem !== undefined ? <p className="ink2">{state.problem}</p> : null}
          </section>
          {queue.rejected.map((entry) => (
            <Refused key={entry.operation.opId} entry={entry} />
          ))}
        </div>
        <div className="stack gap-6">
          <QueueList title="Waits on this device" empty="Nothing waits." entries={queue.waiting} />
          <SoFar />
          <QueueList title="Sent today" empty="Nothing sent today." entries={queue.sentToday} />
          <Person waiting={queue.waiting.length} />
        </div>
      </div>
    </>
  );
}
