import { useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { ShiftSummaryFigures } from './ShiftSummaryFigures.tsx';
import { ShiftSummaryHead } from './ShiftSummaryHead.tsx';
import { ShiftSummaryOpen } from './ShiftSummaryOpen.tsx';
import { ShiftSummarySend } from './ShiftSummarySend.tsx';
import { ShiftSummaryTimes } from './ShiftSummaryTimes.tsx';
import { type ShownSummary, useShiftSummary } from './use-shift-summary.ts';

/** What a shift did and what it leaves open: to read, to print on one page, to hand in. */
export function ShiftSummaryPage() {
  return (
    <StationRoot area="shift" flow className="summary">
      <Summary />
    </StationRoot>
  );
}

function Summary() {
  const shownSummary = useShiftSummary();
  return (
    <>
      <Top title="Shift summary" back={{ href: '/shift', label: 'Back to Shift' }}>
        <SyncChip />
      </Top>
      {shownSummary === undefined ? <p className="ink2">Adding up.</p> : <Sheet shownSummary={shownSummary} />}
    </>
  );
}

/** Letters of a note that leave room for the rest. */
const ON_ONE_PAGE = 600;

function Sheet({ shownSummary }: { shownSummary: ShownSummary }) {
  const [note, setNote] = useState('');
  const { shown, span, result } = shownSummary;
  if ('problem' in result) return <ShiftSummaryTimes shownSummary={shownSummary} />;
  const { summary } = result;
  return (
    <>
      <div className="summary-cols stack gap-6">
        <div className="stack gap-4">
          <ShiftSummaryTimes shownSummary={shownSummary} />
          <ShiftSummaryHead span={span} now={shown.now} />
          <ShiftSummaryFigures summary={summary} span={span} now={shown.now} />
          <label className="field screen-only">
            <span>Note for the manager</span>
            <textarea rows={2} maxLength={ON_ONE_PAGE} value={note} onChange={(event) => setNote(event.target.value)} />
          </label>
          {note.trim() === '' ? null : <p className="paper-only paper-note">{note}</p>}
        </div>
        <ShiftSummaryOpen open={summary.open} shown={shown} />
      </div>
      <ShiftSummarySend span={span} summary={summary} note={note} reports={shown.reports} />
    </>
  );
}
