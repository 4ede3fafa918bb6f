import { useEffect, useRef } from 'react';
import { formatDue } from '#components/ui/format-time.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';

interface Props {
  tub: Row<'buckets'>;
  jobs: ReadonlyMap<string, Row<'jobs'>>;
  value: string | null;
  onChoose: (jobId: string | null) => void;
}

/** The job it goes to: those that need this colour first, soonest due first. */
export function JobField({ tub, jobs, value, onChoose }: Props) {
  const { locale } = useStation().station.shop;
  const select = useRef<HTMLSelectElement>(null);
  useEffect(() => select.current?.focus(), []);
  const byDue = [...jobs.values()].sort((a, b) => a.due.localeCompare(b.due));
  const needs = (job: Row<'jobs'>) => job.colours.some((colour) => colour.formulaId === tub.formulaId);
  const option = (job: Row<'jobs'>) => (
    <option key={job.id} value={job.id}>
      {job.number} · {job.customer} · {formatDue(job.due, locale, new Date())}
    </option>
  );
  return (
    <label className="field">
      <span>Job</span>
      <select
        ref={select}
        className="box"
        value={value ?? ''}
        onChange={(event) => onChoose(event.target.value === '' ? null : event.target.value)}
      >
        <option value="">No job</option>
        <optgroup label="Need this colour">{byDue.filter(needs).map(option)}</optgroup>
        <optgroup label="Other jobs">{byDue.filter((job) => !needs(job)).map(option)}</optgroup>
      </select>
    </label>
  );
}
