import { useLiveQuery } from 'dexie-react-hooks';
import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Weighing } from '#contract/weighing.ts';
import { listWeighings } from '#offline/weighings.ts';

/** Batches in the pot: each opens at the step where it was left. */
export function OpenBatches() {
  const { station } = useStation();
  const weighings = useLiveQuery(() => listWeighings(station), [station]);
  const formulas = useFormulas();
  if (weighings === undefined || formulas === undefined || weighings.length === 0) return null;
  return (
    <section className="stack">
      <div className="head">
        <h2>Open batches</h2>
        <span className="ink2">{weighings.length}</span>
      </div>
      {weighings.map((weighing) => {
        const formula = formulas.get(weighing.formulaId);
        const revision = formula?.revisions.find((entry) => entry.revision === weighing.revision);
        return (
          <a key={weighing.id} className="row" href={`/weigh?batch=${weighing.id}`}>
            <Strip lab={revision?.lab ?? null} hiding={revision?.hiding ?? 0} />
            <div>
              <b>{formula?.name ?? 'Formula not on this device'}</b>
              <small className="ink2">{describeStage(weighing)}</small>
            </div>
            <span className="num">
              <Mass mg={weighing.batchMg} />
            </span>
          </a>
        );
      })}
    </section>
  );
}

function describeStage(weighing: Weighing): string {
  if (weighing.remaining.length === 0) return 'Stir, check, fill';
  const done = weighing.additions.length;
  return `Step ${done + 1} of ${done + weighing.remaining.length}`;
}
