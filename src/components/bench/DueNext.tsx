import { Strip } from '#components/ui/Strip.tsx';
import { formatDue } from '#components/ui/format-time.ts';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';

const MOST = 8;

/** The next job colours by due time, with the need as a range; a mixer starts from here. */
export function DueNext({ mixes }: { mixes: boolean }) {
  const { station } = useStation();
  const jobs = useRows('jobs');
  const formulas = useFormulas();
  if (jobs === undefined || formulas === undefined) return null;
  const now = new Date();
  const due = [...jobs.values()]
    .filter((job) => new Date(job.due).getTime() > now.getTime() - 12 * 3_600_000)
    .sort((a, b) => a.due.localeCompare(b.due))
    .flatMap((job) => job.colours.map((colour) => ({ job, colour })))
    .slice(0, MOST);
  return (
    <section className="stack">
      <div className="head">
        <h2>Due next</h2>
      </div>
      {due.length === 0 ? <p className="ink2">No jobs due.</p> : null}
      {due.map(({ job, colour }) => {
        const formula = formulas.get(colour.formulaId);
        const revision = formula?.revisions[0];
        const inside = (
          <>
            <Strip lab={revision?.lab ?? null} hiding={revision?.hiding ?? 0} />
            <div>
              <b>{formula?.name ?? 'Formula not on this device'}</b>
              <small className="ink2">
                {formatDue(job.due, station.shop.locale, now)} · <span className="nowrap">{job.number}</span>
              </small>
            </div>
            <span className="num text-20">
              {Math.round(colour.needLowMg / 1000)}–{Math.round(colour.needHighMg / 1000)} <u>g</u>
            </span>
          </>
        );
        const key = `${job.id} ${colour.n}`;
        return mixes ? (
          <a key={key} className="row" href={`/mix?formula=${colour.formulaId}&job=${job.id}&colour=${colour.n}`}>
            {inside}
          </a>
        ) : (
          <div key={key} className="row">
            {inside}
          </div>
        );
      })}
    </section>
  );
}
