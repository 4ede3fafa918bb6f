import type { Lab } from '#components/ui/film.ts';
import type { OpenStep } from '#contract/weighing.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

export interface StepWords {
  name: string;
  /** Lot of a component; place and tub code of a leftover. */
  detail: string;
  lab: Lab | null;
  hiding: number;
}

/** What is to be put into the pot, and where it stands. */
export function describeStep(step: OpenStep, facts: WeighFacts): StepWords {
  if (step.kind === 'component') {
    const component = facts.components.get(step.componentId);
    const lot = facts.lots.get(step.componentId);
    return {
      name: component?.name ?? 'Component not on this device',
      detail: lot === undefined ? 'Stir the stock first' : `Lot ${lot.code} · stir the stock first`,
      lab: component?.lab ?? null,
      hiding: component?.hiding ?? 0,
    };
  }
  const bucket = facts.buckets.get(step.bucketId);
  if (bucket === undefined) return { name: 'Leftover not on this device', detail: '', lab: null, hiding: 0 };
  const place = bucket.locationId === null ? undefined : facts.locations.get(bucket.locationId)?.code;
  const code = `${bucket.code.slice(0, 4)}-${bucket.code.slice(4)}`;
  return {
    name: bucket.name,
    detail: `Leftover ${code}${place === undefined ? '' : `, from ${place}`}${step.empties ? ' · scrape it empty' : ''}`,
    lab: bucket.lab,
    hiding: bucket.hiding,
  };
}
