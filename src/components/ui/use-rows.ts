import { useLiveQuery } from 'dexie-react-hooks';
import type { Row, TableName } from '#contract/rows.ts';
import { readRows } from '#offline/shown.ts';
import { useStation } from './station-context.ts';

/** All rows of one table by id; undefined until the disk has answered. */
export function useRows<T extends TableName>(table: T): ReadonlyMap<string, Row<T>> | undefined {
  const { station } = useStation();
  return useLiveQuery(
    async () => new Map((await readRows(station, table)).map((row): [string, Row<T>] => [row.id, row])),
    [station, table],
  );
}
