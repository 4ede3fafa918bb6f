import { useStation } from '#components/ui/station-context.ts';
import { mayRecord } from '#contract/roles.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import type { QueuedOperation } from '#offline/outbox.ts';
import { correctEntry } from '#offline/tray.ts';
import { Alert } from './Alert.tsx';
import { useDecision } from './use-decision.ts';

/** Logs that came in a file from another device: this one sends them all as its own, in the order of recording. */
export function FromElsewhere({ rejected }: { rejected: readonly QueuedOperation[] }) {
  const { station } = useStation();
  const { decide, saving, problem } = useDecision(() => undefined);
  const others = rejected.filter(
    ({ operation, problem: why }) => why?.code === 'wrong-station' && mayRecord(station.person.role, operation.type),
  );
  if (others.length < 2 && problem === undefined) return null;
  const sendAll = async () => {
    for (const { opId, operation } of others) await correctEntry(station, opId, bodyOf(operation));
  };
  return (
    <article className="decide card">
      <div>
        <h2>{others.length} logs of another device</h2>
        <p>Send them from here when that device is lost. What it sends by itself is not counted twice.</p>
      </div>
      <button type="button" className="key wide" disabled={saving} onClick={() => void decide(sendAll)}>
        <span className="g g-send">Send all {others.length} from here</span>
      </button>
      <Alert text={problem} />
    </article>
  );
}

const bodyOf = ({ type, body }: QueuedOperation['operation']) => ({ type, body }) as OperationBody;
