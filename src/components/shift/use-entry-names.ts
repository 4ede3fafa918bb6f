import { useLiveQuery } from 'dexie-react-hooks';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import { readBatches, readShelf } from '#offline/shown.ts';
import type { EntryNames } from './make-fields.ts';

/** All that gives the ids of an entry their names; undefined until the disk has answered. */
export function useEntryNames(): EntryNames | undefined {
  const { station } = useStation();
  const formulas = useFormulas();
  const jobs = useRows('jobs');
  const locations = useRows('locations');
  const containers = useRows('containers');
  const components = useRows('components');
  const lots = useRows('lots');
  const families = useRows('families');
  const shown = useLiveQuery(
    async () => ({ tubs: await readShelf(station), batches: await readBatches(station) }),
    [station],
  );
  if (!formulas || !jobs || !locations || !containers || !components || !lots || !families || !shown) return undefined;
  const buckets = new Map(shown.tubs.map((tub) => [tub.id, tub]));
  const batches = new Map(shown.batches.map((batch) => [batch.id, batch]));
  return {
    locale: station.shop.locale,
    formulas,
    buckets,
    jobs,
    locations,
    containers,
    components,
    lots,
    families,
    batches,
  };
}
