import { useLiveQuery } from 'dexie-react-hooks';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { Top } from '#components/ui/Top.tsx';
import { Unsaved } from '#components/ui/Unsaved.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { findWeighing } from '#offline/weighings.ts';
import { Finish } from './Finish.tsx';
import { WeighStep } from './WeighStep.tsx';
import { useOtherTab } from './use-other-tab.ts';
import { useWeighFacts } from './use-weigh-facts.ts';

/** One open batch: its next step, or the finish. What is shown is what lies on the disk. */
export function WeighPage() {
  return (
    <StationRoot area="bench" flow className="weigh">
      <OpenBatch batchId={new URLSearchParams(location.search).get('batch') ?? ''} />
    </StationRoot>
  );
}

function OpenBatch({ batchId }: { batchId: string }) {
  const { station } = useStation();
  const weighing = useLiveQuery(async () => (await findWeighing(station, batchId)) ?? null, [station, batchId]);
  const facts = useWeighFacts(weighing ?? undefined);
  const wentOn = useOtherTab(weighing);
  if (weighing === null) {
    return (
      <>
        <Top title="Weigh in" back={{ href: '/', label: 'Back to the Bench' }} />
        <p>This batch is not open on this device. It may be finished.</p>
      </>
    );
  }
  if (weighing === undefined || facts === undefined) return null;
  return (
    <>
      {wentOn ? <Unsaved why="This batch went on in another tab of this device. Weigh in one tab only." /> : null}
      {weighing.remaining.length === 0 ? (
        <Finish weighing={weighing} facts={facts} />
      ) : (
        <WeighStep key={weighing.additions.length} weighing={weighing} facts={facts} />
      )}
    </>
  );
}
