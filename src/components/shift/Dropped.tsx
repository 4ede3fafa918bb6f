import { useStation } from '#components/ui/station-context.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { canTakeBack, takeBackDrop } from '#offline/tray.ts';
import { Alert } from './Alert.tsx';
import { useDecision } from './use-decision.ts';

/** Drops that have not left this device: each can be taken back. */
export function Dropped({ waiting }: { waiting: readonly QueuedOperation[] }) {
  const { station } = useStation();
  const { decide, saving, problem } = useDecision(() => undefined);
  return (
    <>
      {waiting.filter(canTakeBack).map(({ opId, operation }) => (
        <div key={opId} className="note">
          <span>Dropped: {operation.type === 'entry-dropped' ? operation.body.reason : ''}</span>
          <button
            type="button"
            className="key"
            disabled={saving}
            onClick={() => void decide(() => takeBackDrop(station, opId))}
          >
            <span className="g g-undo">Take back</span>
          </button>
        </div>
      ))}
      <Alert text={problem} />
    </>
  );
}
