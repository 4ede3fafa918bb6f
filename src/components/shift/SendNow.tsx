import { useStation } from '#components/ui/station-context.ts';
import { useSyncState } from '#components/ui/use-sync-state.ts';

/** How much waits and how much needs a decision; the button, and why it does not go. */
export function SendNow({ waiting, decide }: { waiting: number; decide: number }) {
  const { sync } = useStation();
  const state = useSyncState();
  const sending = state.phase === 'sending';
  return (
    <section className="stack">
      <div className="two">
        <div>
          <span className="big" data-count="waiting">
            {waiting}
          </span>
          <span className="badge g-device">{waiting === 1 ? 'Waits to be sent' : 'Wait to be sent'}</span>
        </div>
        <div>
          <span className="big" data-count="decide">
            {decide}
          </span>
          <span className="badge g-two">{decide === 1 ? 'Needs a decision' : 'Need a decision'}</span>
        </div>
      </div>
      <button type="button" className="key wide" disabled={sending} onClick={() => void sync.sendNow()}>
        <span className="g g-send">{sending ? 'Sending' : 'Send now'}</span>
      </button>
      {state.phase === 'offline' ? <p className="ink2 g g-off">No signal. Keep working.</p> : null}
      {state.phase === 'signed-out' ? (
        <a className="key go wide" href="/sign-in?next=/shift">
          Sign in to send {waiting} {waiting === 1 ? 'log' : 'logs'}
        </a>
      ) : null}
      {state.phase === 'failed' && state.problem !== undefined ? <p className="ink2">{state.problem}</p> : null}
    </section>
  );
}
