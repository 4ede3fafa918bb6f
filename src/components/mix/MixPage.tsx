import { FormulaList } from '#components/ui/FormulaList.tsx';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { mayRecord } from '#contract/roles.ts';
import { HowMuch } from './HowMuch.tsx';

/** Choose a formula, then how much; both steps are in the address, so that back works. */
export function MixPage() {
  return (
    <StationRoot area="bench" flow>
      <Mix />
    </StationRoot>
  );
}

function Mix() {
  const { station } = useStation();
  const search = new URLSearchParams(location.search);
  const formulaId = search.get('formula');
  if (!mayRecord(station.person.role, 'batch-mixed')) {
    return (
      <>
        <Top title="Mix" back={{ href: '/', label: 'Back to the Bench' }} />
        <p>Mixing needs a mixer or manager. Ask one to sign in.</p>
      </>
    );
  }
  if (formulaId !== null) {
    return (
      <HowMuch
        formulaId={formulaId}
        jobId={search.get('job')}
        colour={Number(search.get('colour') ?? '0')}
        useBucketId={search.get('use')}
      />
    );
  }
  return (
    <>
      <Top title="Choose a formula" back={{ href: '/', label: 'Back to the Bench' }}>
        <SyncChip />
      </Top>
      <FormulaList
        hrefOf={(formula) => {
          const next = new URLSearchParams(search);
          next.set('formula', formula.id);
          return `/mix?${next}`;
        }}
      />
    </>
  );
}
