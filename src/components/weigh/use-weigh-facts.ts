import { useLiveQuery } from 'dexie-react-hooks';
import { useMemo } from 'react';
import { tolerancesFor } from '#components/ui/tolerances.ts';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import type { Weighing } from '#contract/weighing.ts';
import { type Composition, compositionFromParts } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';
import { readShelf } from '#offline/shown.ts';

export interface WeighFacts {
  formula: Row<'formulas'>;
  revision: Row<'formulas'>['revisions'][number];
  target: Composition;
  tolerance: ReadonlyMap<string, PartsPerBillion>;
  scale: Row<'scales'>;
  components: ReadonlyMap<string, Row<'components'>>;
  buckets: ReadonlyMap<string, Row<'buckets'>>;
  locations: ReadonlyMap<string, Row<'locations'>>;
  containers: ReadonlyMap<string, Row<'containers'>>;
  /** Of each component the oldest lot that still holds ink. */
  lots: ReadonlyMap<string, Row<'lots'>>;
}

/** Everything that a step shows, read from this device. */
export function useWeighFacts(weighing: Weighing | undefined): WeighFacts | undefined {
  const { station } = useStation();
  const shelf = useLiveQuery(() => readShelf(station), [station]);
  const formulas = useFormulas();
  const [components, scales, lots] = [useRows('components'), useRows('scales'), useRows('lots')];
  const [locations, containers] = [useRows('locations'), useRows('containers')];
  return useMemo(() => {
    if (!weighing || !shelf || !formulas || !components || !scales || !lots || !locations || !containers)
      return undefined;
    const formula = formulas.get(weighing.formulaId);
    const revision = formula?.revisions.find((entry) => entry.revision === weighing.revision);
    const scale = scales.get(weighing.scaleId);
    if (formula === undefined || revision === undefined || scale === undefined) return undefined;
    const target = compositionFromParts(revision.parts);
    return {
      formula,
      revision,
      target,
      tolerance: tolerancesFor(target, components),
      scale,
      components,
      buckets: new Map(shelf.map((bucket) => [bucket.id, bucket])),
      locations,
      containers,
      lots: lotsInUse([...lots.values()]),
    };
  }, [weighing, shelf, formulas, components, scales, lots, locations, containers]);
}

function lotsInUse(lots: readonly Row<'lots'>[]): ReadonlyMap<string, Row<'lots'>> {
  const inUse = new Map<string, Row<'lots'>>();
  for (const lot of [...lots].sort(
    (a, b) => (a.useBy ?? '').localeCompare(b.useBy ?? '') || a.code.localeCompare(b.code),
  )) {
    if (lot.balanceMg > 0 && !inUse.has(lot.componentId)) inUse.set(lot.componentId, lot);
  }
  return inUse;
}
