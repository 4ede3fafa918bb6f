import { sql } from 'kysely';
import { tableNames } from '#contract/rows.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import { pullTables } from './pull-rows.ts';

/** A changed row, by its table's place among `tableNames`. */
export interface ChangeKey {
  place: number;
  id: string;
  seq: number;
}

/** The rows of a page as JSON text, in the page's order: one statement a table that has any. */
export async function readChanges(trx: ShopTransaction, shopId: string, page: readonly ChangeKey[]): Promise<string[]> {
  const byTable = new Map<number, string[]>();
  for (const { place, id } of page) {
    const ids = byTable.get(place);
    if (ids === undefined) byTable.set(place, [id]);
    else ids.push(id);
  }
  const texts = new Map<string, string>();
  for (const [place, ids] of byTable)
    for (const { id, row } of await readRows(trx, shopId, place, ids)) texts.set(`${place} ${id}`, row);
  return page.map(({ place, id }) => changeText(place, id, texts.get(`${place} ${id}`) ?? null));
}

async function readRows(trx: ShopTransaction, shopId: string, place: number, ids: readonly string[]) {
  const name = nameAt(place);
  const { table, row } = pullTables[name];
  const shop = name === 'shop' ? sql.ref('t.id') : sql.ref('t.shop_id');
  const found = await sql<{ id: string; row: string }>`
    select t.id, ${row}::text as row from ${sql.table(table)} t
    where ${shop} = ${shopId} and t.id = any(${ids}::uuid[]) and t.deleted_at is null`.execute(trx);
  return found.rows;
}

/** As the contract has it; the row's text begins with its bracket, after which its id is put. */
function changeText(place: number, id: string, row: string | null): string {
  const begun = `{"table":"${nameAt(place)}","id":"${id}",`;
  return row === null ? `${begun}"deleted":true}` : `${begun}"row":{"id":"${id}",${row.slice(1)}}`;
}

function nameAt(place: number): (typeof tableNames)[number] {
  const name = tableNames[place];
  if (name === undefined) throw new RangeError(`There is no table ${place} that stations see.`);
  return name;
}
