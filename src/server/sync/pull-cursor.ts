/** The last row that was read: everything after it in the order of (change sequence, table, id) is still to come. */
export interface Cursor {
  epoch: string | null;
  seq: number;
  table: number;
  id: string;
}

const NIL = '00000000-0000-0000-0000-000000000000';
/** Behind every table: the whole of `seq` was read. */
const END = 999;

export function parseCursor(text: string): Cursor {
  const [epoch, seq, table, id] = text.split(':');
  if (epoch === undefined || epoch === '' || seq === undefined || table === undefined || id === undefined) {
    return { epoch: null, seq: 0, table: -1, id: NIL };
  }
  return { epoch, seq: Number(seq), table: Number(table), id };
}

export function cursorAt(epoch: string, last: { seq: number; place: number; id: string }): string {
  return `${epoch}:${last.seq}:${last.place}:${last.id}`;
}

export function cursorAfter(epoch: string, seq: number): string {
  return `${epoch}:${seq}:${END}:${NIL}`;
}
