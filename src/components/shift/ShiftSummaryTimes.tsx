import { Choices } from '#components/ui/Choices.tsx';
import { SHIFT_CHOICES } from './shift-summary-span.ts';
import type { ShownSummary } from './use-shift-summary.ts';

/** Which shift: one of three usual times, or two typed ones. */
export function ShiftSummaryTimes({ shownSummary }: { shownSummary: ShownSummary }) {
  const { choice, choose, typed, type, result } = shownSummary;
  const problem = 'problem' in result ? result.problem : undefined;
  return (
    <section className="stack screen-only" aria-label="Time">
      <Choices label="Time" options={SHIFT_CHOICES} value={choice} onChoose={choose} className="pair" />
      {choice === 'other' ? (
        <div className="times">
          {(['from', 'to'] as const).map((end) => (
            <label key={end} className="field">
              <span>{end === 'from' ? 'From' : 'To'}</span>
              <input
                type="datetime-local"
                value={typed[end]}
                aria-describedby={problem === undefined ? undefined : 'times-problem'}
                onChange={(event) => type({ ...typed, [end]: event.target.value })}
              />
            </label>
          ))}
        </div>
      ) : null}
      {problem === undefined ? null : (
        <p id="times-problem" role="alert" className="badge warn g-warn justify-self-start whitespace-normal">
          {problem}
        </p>
      )}
    </section>
  );
}
