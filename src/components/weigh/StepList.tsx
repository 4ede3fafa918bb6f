import { useStation } from '#components/ui/station-context.ts';
import type { Weighing } from '#contract/weighing.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import { describeStep } from './describe-step.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

/** All steps at the left, from tablet up: what is in the pot, what comes. */
export function StepList({ weighing, facts }: { weighing: Weighing; facts: WeighFacts }) {
  const { station } = useStation();
  const grams = (mg: number) =>
    formatGrams(mg as Milligrams, facts.scale.readabilityMg as Milligrams, station.shop.locale);
  return (
    <ol className="steps" aria-label="Steps">
      {weighing.additions.map((addition, n) => (
        <li key={`done ${n}`}>
          <span className="g g-ok" />
          {nameOf(addition, facts)}
          <span className="num">{grams(addition.actualMg)}</span>
        </li>
      ))}
      {weighing.remaining.map((step, n) => (
        <li key={`next ${n}`} className={n === 0 ? 'at' : ''} aria-current={n === 0 ? 'step' : undefined}>
          <span>{weighing.additions.length + n + 1}</span>
          {describeStep(step, facts).name}
          <span className="num">{grams(step.plannedMg)}</span>
        </li>
      ))}
    </ol>
  );
}

export function nameOf(addition: Weighing['additions'][number], facts: WeighFacts): string {
  if (addition.kind === 'component') return facts.components.get(addition.componentId)?.name ?? 'Component';
  return facts.buckets.get(addition.bucketId)?.name ?? 'Leftover';
}
