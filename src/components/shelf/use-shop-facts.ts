import { useLiveQuery } from 'dexie-react-hooks';
import { useMemo } from 'react';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useShelf } from '#components/ui/use-shelf.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { readBatches } from '#offline/shown.ts';

export interface ShopFacts {
  shelf: readonly Row<'buckets'>[];
  batches: readonly Row<'batches'>[];
  formulas: ReadonlyMap<string, Row<'formulas'>>;
  families: ReadonlyMap<string, Row<'families'>>;
  locations: ReadonlyMap<string, Row<'locations'>>;
  people: ReadonlyMap<string, Row<'people'>>;
  jobs: ReadonlyMap<string, Row<'jobs'>>;
  components: ReadonlyMap<string, Row<'components'>>;
  containers: ReadonlyMap<string, Row<'containers'>>;
  /** This station's scales and the shop's common ones. */
  scales: readonly Row<'scales'>[];
}

/** What the page of one tub reads; undefined until the disk has answered. */
export function useShopFacts(): ShopFacts | undefined {
  const { station } = useStation();
  const shelf = useShelf();
  const batches = useLiveQuery(() => readBatches(station), [station]);
  const formulas = useFormulas();
  const [families, locations, people] = [useRows('families'), useRows('locations'), useRows('people')];
  const [jobs, components, containers] = [useRows('jobs'), useRows('components'), useRows('containers')];
  const scales = useRows('scales');
  return useMemo(() => {
    if (!shelf || !batches || !formulas || !families || !locations || !people) return undefined;
    if (!jobs || !components || !containers || !scales) return undefined;
    const own = [...scales.values()].filter(
      (scale) => scale.stationId === null || scale.stationId === station.station.id,
    );
    return { shelf, batches, formulas, families, locations, people, jobs, components, containers, scales: own };
  }, [station, shelf, batches, formulas, families, locations, people, jobs, components, containers, scales]);
}
