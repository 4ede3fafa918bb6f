import type { Insertable } from 'kysely';
import type { Composition } from '#domain/composition.ts';
import type * as Tables from '#server/db/tables.ts';
import type { NewJob } from '#server/jobs/queue-jobs.ts';
import { type BucketRow, type PushFacts, type Revision, revisionKey } from './push-facts.ts';

/** Rows that a push adds, and what it changes of others. */
export interface PushWrites {
  operations: Insertable<Tables.Operations>[];
  batches: Insertable<Tables.Batches>[];
  additions: Insertable<Tables.Additions>[];
  bucketComposition: Insertable<Tables.BucketComposition>[];
  bucketParents: Insertable<Tables.BucketParents>[];
  movements: Insertable<Tables.Movements>[];
  lotMovements: Insertable<Tables.LotMovements>[];
  formulaRevisions: Insertable<Tables.FormulaRevisions>[];
  formulaParts: Insertable<Tables.FormulaParts>[];
  releases: { batchId: string; light: string; releasedBy: string }[];
  /** Work that becomes due when the push commits. */
  jobs: NewJob[];
}

export function noWrites(): PushWrites {
  return {
    operations: [],
    batches: [],
    additions: [],
    bucketComposition: [],
    bucketParents: [],
    movements: [],
    lotMovements: [],
    formulaRevisions: [],
    formulaParts: [],
    releases: [],
    jobs: [],
  };
}

/** What one operation would do. It reads the book with its own changes on top, and leaves it as it is until accepted. */
export class PushDraft {
  readonly facts: PushFacts;
  readonly writes = noWrites();
  readonly tubs = new Map<string, BucketRow>();
  readonly compositions = new Map<string, Composition>();
  readonly newTubs = new Set<string>();
  private readonly book: PushBook;

  constructor(book: PushBook) {
    this.book = book;
    this.facts = book.facts;
  }

  findTub(id: string): BucketRow | undefined {
    return this.tubs.get(id) ?? this.book.tubs.get(id) ?? this.facts.buckets.get(id);
  }

  tubsOfBatch(batchId: string): BucketRow[] {
    const ids = new Set([...this.facts.buckets.keys(), ...this.book.tubs.keys(), ...this.tubs.keys()]);
    return [...ids].flatMap((id) => this.findTub(id) ?? []).filter((tub) => tub.batchId === batchId);
  }

  /** Of a formula with what this push proposes; 0: there is no such formula. */
  newestRevision(formulaId: string): number {
    const numbers = this.revisionsWritten()
      .filter((row) => row.formulaId === formulaId)
      .map(({ revision }) => revision);
    return Math.max(this.facts.newestRevisions.get(formulaId) ?? 0, ...numbers);
  }

  findRevision(key: string): Pick<Revision, 'lab' | 'hiding'> | undefined {
    const written = this.revisionsWritten().find(({ formulaId, revision }) => revisionKey(formulaId, revision) === key);
    if (written === undefined) return this.facts.revisions.get(key);
    return { lab: typeof written.lab === 'string' ? JSON.parse(written.lab) : null, hiding: written.hiding };
  }

  private revisionsWritten() {
    return [...this.book.writes.formulaRevisions, ...this.writes.formulaRevisions];
  }

  /** Empty when it is unknown. */
  compositionOf(id: string): Composition {
    return this.compositions.get(id) ?? this.book.compositions.get(id) ?? this.facts.compositions.get(id) ?? new Map();
  }

  hasBatch(id: string): boolean {
    return (
      this.facts.batches.has(id) ||
      [this.writes, this.book.writes].some(({ batches }) => batches.some((batch) => batch.id === id))
    );
  }

  /** True when the entry with which this would have begun was refused; tubs, batches and releases as `bornWith` names them. */
  isRefused(id: string): boolean {
    return this.facts.refused.has(id) || this.book.refused.has(id);
  }

  isCodeGiven(code: string): boolean {
    if (this.facts.codes.has(code)) return true;
    return [...this.book.tubs.values(), ...this.tubs.values()].some((tub) => tub.code === code);
  }
}

/** A push's operations that are accepted so far: what is written at its end, in one statement a table. */
export class PushBook {
  readonly facts: PushFacts;
  readonly writes = noWrites();
  /** New and changed tubs as they are after the last accepted operation. */
  readonly tubs = new Map<string, BucketRow>();
  readonly compositions = new Map<string, Composition>();
  readonly newTubs = new Set<string>();
  /** What would have begun with a refused entry of this push. */
  readonly refused = new Set<string>();

  constructor(facts: PushFacts) {
    this.facts = facts;
  }

  accept(draft: PushDraft): void {
    for (const key of Object.keys(this.writes) as (keyof PushWrites)[]) {
      (this.writes[key] as unknown[]).push(...draft.writes[key]);
    }
    for (const [id, tub] of draft.tubs) this.tubs.set(id, tub);
    for (const [id, composition] of draft.compositions) this.compositions.set(id, composition);
    for (const id of draft.newTubs) this.newTubs.add(id);
  }
}
