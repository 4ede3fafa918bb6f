import { useLiveQuery } from 'dexie-react-hooks';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useStation } from '#components/ui/station-context.ts';
import { readShelf } from '#offline/shown.ts';
import type { Names } from './describe-operation.ts';

export function useNames(): Names | undefined {
  const { station } = useStation();
  const formulas = useFormulas();
  const shelf = useLiveQuery(() => readShelf(station), [station]);
  if (formulas === undefined || shelf === undefined) return undefined;
  return { formulas, buckets: new Map(shelf.map((bucket) => [bucket.id, bucket])) };
}
