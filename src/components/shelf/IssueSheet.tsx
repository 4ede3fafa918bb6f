import { useState } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import type { SheetProps } from './ActSheet.tsx';
import { JobField } from './JobField.tsx';
import { Problem } from './Problem.tsx';
import { SheetTop } from './SheetTop.tsx';
import { whyNotForJob } from './issue-warnings.ts';
import { useRecord } from './use-record.ts';

/** Hands a tub to a press, for a job or for none; unreleased ink only with a reason that is kept. */
export function IssueSheet({ tub, facts, onClose, onDone }: SheetProps) {
  const recorder = useRecord(onDone);
  const [jobId, setJobId] = useState(tub.jobId);
  const [reason, setReason] = useState('');
  const [tried, setTried] = useState(false);
  const job = jobId === null ? undefined : facts.jobs.get(jobId);
  const warnings = job === undefined ? [] : whyNotForJob(tub, job);
  const missing = !tub.released && reason.trim() === '' ? 'Say why it goes out unreleased.' : undefined;
  const save = () => {
    setTried(true);
    if (missing !== undefined) return;
    const overrideReason = tub.released ? null : reason.trim().slice(0, 200);
    void recorder.record(
      { type: 'bucket-issued', body: { bucketId: tub.id, jobId, overrideReason } },
      job === undefined ? 'Issued to a press.' : `Issued for ${job.number}.`,
    );
  };
  return (
    <form
      className="contents"
      onSubmit={(event) => {
        event.preventDefault();
        save();
      }}
    >
      <SheetTop title="Issue" tub={tub} onClose={onClose} />
      <div className="stack tablet:max-w-[640px] gap-4">
        <p className="text-30 font-bold">
          <Mass mg={tub.balanceMg} />
        </p>
        <JobField tub={tub} jobs={facts.jobs} value={jobId} onChoose={setJobId} />
        {warnings.map((warning) => (
          <p key={warning} className="badge warn g-warn justify-self-start whitespace-normal">
            {warning}
          </p>
        ))}
        {tub.released ? null : (
          <label className="field">
            <span>Not released. Why does it go out?</span>
            <input
              value={reason}
              autoComplete="off"
              maxLength={200}
              aria-invalid={tried && missing !== undefined}
              aria-describedby="reason-problem"
              onChange={(event) => setReason(event.target.value)}
            />
          </label>
        )}
        <Problem id="reason-problem" text={tried ? missing : undefined} />
      </div>
      <div className="dock stack">
        <Problem text={recorder.problem} />
        <button
          type="submit"
          className={`key wide ${missing === undefined ? 'go' : 'log-key'}`}
          disabled={recorder.saving}
        >
          {job === undefined ? 'Issue to a press' : `Issue for ${job.number}`}
        </button>
      </div>
    </form>
  );
}
