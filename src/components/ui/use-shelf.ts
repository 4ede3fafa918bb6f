import { useLiveQuery } from 'dexie-react-hooks';
import type { Row } from '#contract/rows.ts';
import { readShelf } from '#offline/shown.ts';
import { useStation } from './station-context.ts';

/** Every tub as it stands, what waits to be sent included; undefined until the disk has answered. */
export function useShelf(): readonly Row<'buckets'>[] | undefined {
  const { station } = useStation();
  return useLiveQuery(() => readShelf(station), [station]);
}
