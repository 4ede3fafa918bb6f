import { PailMark } from '#components/ui/PailMark.tsx';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { mayRecord } from '#contract/roles.ts';
import { DueNext } from './DueNext.tsx';
import { OpenBatches } from './OpenBatches.tsx';
import { Recounts } from './Recounts.tsx';
import { TodaysBatches } from './TodaysBatches.tsx';

export function BenchPage() {
  return (
    <StationRoot area="bench">
      <Bench />
    </StationRoot>
  );
}

function Bench() {
  const { station } = useStation();
  const mixes = mayRecord(station.person.role, 'batch-mixed');
  return (
    <>
      <Top title="Bench">
        <SyncChip />
        <a className="key who" href="/shift#person">
          <span className="g g-who">{station.person.displayName}</span>
        </a>
      </Top>
      <section className="tiles" aria-label="Start">
        {mixes ? (
          <a className="key go tile" href="/mix">
            <PailMark />
            Mix
          </a>
        ) : null}
        <a className={`key tile ${mixes ? '' : 'go'}`} href="/scan">
          <span className="g g-scan" />
          Scan
        </a>
      </section>
      <div className="lists">
        <Recounts />
        <OpenBatches />
        <TodaysBatches />
        <DueNext mixes={mixes} />
      </div>
    </>
  );
}
