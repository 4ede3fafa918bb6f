import { Dexie, type Table } from 'dexie';
import { type Row, type TableName, tableNames } from '#contract/rows.ts';

interface Meta {
  name: 'position';
  cursor: string;
  seq: number;
  /** When the first load was complete; null until then. */
  completeAt: string | null;
}

const EXTRA_INDEXES: Partial<Record<TableName, string>> = { buckets: '&id, code', formulas: '&id, code' };

/** Rows pulled from the server and how far; may be thrown away and pulled again. */
export class Cache extends Dexie {
  declare meta: Table<Meta, 'position'>;

  constructor(shopId: string, installId: string) {
    super(`halfpail-cache-${shopId}-${installId}`);
    this.version(1).stores({
      meta: '&name',
      ...Object.fromEntries(tableNames.map((name) => [name, EXTRA_INDEXES[name] ?? '&id'])),
    });
  }

  rows<T extends TableName>(name: T): Table<Row<T>, string> {
    return this.table(name);
  }
}
