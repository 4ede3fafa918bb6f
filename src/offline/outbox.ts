import { Dexie, type Table } from 'dexie';
import type { Operation } from '#contract/operation.ts';
import type { Problem } from '#contract/problem.ts';
import type { Weighing } from '#contract/weighing.ts';
import { tubsOf } from './touched-buckets.ts';

export interface QueuedOperation {
  opId: string;
  deviceSeq: number;
  operation: Operation;
  /** Those that it touches or begins: the next entry on one of them finds this one without reading the queue. */
  tubs: string[];
  /** sent: the server has it; rejected: it waits for a person; dropped: a person let it go. */
  status: 'waiting' | 'sent' | 'rejected' | 'dropped';
  changeSeq: number | null;
  problem: Problem | null;
  recordedAt: string;
  sentAt: string | null;
  /** When it was first put on the wire; kept of drops only, which can be taken back until then. */
  triedAt?: string;
}

export interface KeyRow {
  name: string;
  value: unknown;
}

/** What this install has recorded and not yet forgotten; never migrated destructively, flushed to the disk. */
export class Outbox extends Dexie {
  declare ops: Table<QueuedOperation, string>;
  declare weighings: Table<Weighing, string>;
  declare keys: Table<KeyRow, string>;

  constructor(shopId: string, installId: string) {
    super(`halfpail-outbox-${shopId}-${installId}`, { chromeTransactionDurability: 'strict' });
    this.version(1).stores({ ops: '&opId, deviceSeq, status', weighings: '&id', keys: '&name' });
    this.version(2)
      .stores({ ops: '&opId, deviceSeq, status, *tubs' })
      .upgrade((outbox) =>
        outbox
          .table<QueuedOperation>('ops')
          .toCollection()
          .modify((queued) => {
            queued.tubs = tubsOf(queued.operation);
          }),
      );
  }
}
