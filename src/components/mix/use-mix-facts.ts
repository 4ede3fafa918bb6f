import { useLiveQuery } from 'dexie-react-hooks';
import { useMemo } from 'react';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { type Composition, compositionFromParts } from '#domain/composition.ts';
import { readShelf } from '#offline/shown.ts';

export interface MixFacts {
  formula: Row<'formulas'>;
  revision: Row<'formulas'>['revisions'][number];
  target: Composition;
  job: Row<'jobs'> | undefined;
  shop: Row<'shop'>;
  buckets: readonly Row<'buckets'>[];
  components: ReadonlyMap<string, Row<'components'>>;
  containers: ReadonlyMap<string, Row<'containers'>>;
  families: ReadonlyMap<string, Row<'families'>>;
  locations: ReadonlyMap<string, Row<'locations'>>;
  rules: readonly Row<'familyRules'>[];
  /** This station's scales and the shop's common ones, finest first. */
  scales: readonly Row<'scales'>[];
}

/** Everything that sizing a batch reads; undefined while loading, null when the formula is not on this device. */
export function useMixFacts(formulaId: string, jobId: string | null): MixFacts | null | undefined {
  const { station } = useStation();
  const buckets = useLiveQuery(() => readShelf(station), [station]);
  const formulas = useFormulas();
  const [shops, components, containers] = [useRows('shop'), useRows('components'), useRows('containers')];
  const [families, locations, rules] = [useRows('families'), useRows('locations'), useRows('familyRules')];
  const [scales, jobs] = [useRows('scales'), useRows('jobs')];
  return useMemo(() => {
    if (!buckets || !formulas || !shops || !components || !containers) return undefined;
    if (!families || !locations || !rules || !scales || !jobs) return undefined;
    const formula = formulas.get(formulaId);
    const revision = formula?.revisions[0];
    const shop = [...shops.values()][0];
    if (formula === undefined || revision === undefined || shop === undefined) return null;
    return {
      formula,
      revision,
      target: compositionFromParts(revision.parts),
      job: jobId === null ? undefined : jobs.get(jobId),
      shop,
      buckets,
      components,
      containers,
      families,
      locations,
      rules: [...rules.values()],
      scales: [...scales.values()]
        .filter((scale) => scale.stationId === null || scale.stationId === station.station.id)
        .sort((a, b) => a.readabilityMg - b.readabilityMg),
    };
  }, [
    formulaId,
    jobId,
    station,
    buckets,
    formulas,
    shops,
    components,
    containers,
    families,
    locations,
    rules,
    scales,
    jobs,
  ]);
}
