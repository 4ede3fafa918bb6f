import { useLiveQuery } from 'dexie-react-hooks';
import type { Row } from '#contract/rows.ts';
import { readFormulas } from '#offline/shown.ts';
import { useStation } from './station-context.ts';

/** All formulas by id; undefined until the disk has answered. */
export function useFormulas(): ReadonlyMap<string, Row<'formulas'>> | undefined {
  const { station } = useStation();
  return useLiveQuery(async () => new Map((await readFormulas(station)).map((row) => [row.id, row])), [station]);
}
