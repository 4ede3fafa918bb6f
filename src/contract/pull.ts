import * as z from 'zod/mini';
import { uuid } from './identifiers.ts';
import { PROTOCOL } from './push.ts';
import { tableNames } from './rows.ts';

const table = z.enum(tableNames as [string, ...string[]]);

/** `epoch:seq:table:id`: the last row that was read; the empty string is the beginning. */
export const pullCursor = z
  .string()
  .check(z.maxLength(200), z.regex(/^$|^[0-9a-f-]{36}:\d{1,15}:\d{1,3}:[0-9a-f-]{36}$/));

/**
 * One page of changes: rows in the order of (change sequence, table, id), tombstones among them.
 * `own` lists this install's operations that the rows contain, so that its overlay drops them.
 */
export const pullResponse = z.object({
  protocol: z.literal(PROTOCOL),
  serverTime: z.iso.datetime({ offset: true }),
  cursor: z.string(),
  seq: z.int(),
  more: z.boolean(),
  /** Rows still to come after this page; counted on the first page from the beginning, for its progress bar. */
  remaining: z.nullable(z.int()),
  changes: z.array(
    z.union([z.object({ table, id: uuid, row: z.unknown() }), z.object({ table, id: uuid, deleted: z.literal(true) })]),
  ),
  own: z.array(z.object({ opId: uuid, changeSeq: z.int() })),
});
export type PullResponse = z.infer<typeof pullResponse>;
