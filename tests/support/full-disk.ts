let isFull: (database: string) => boolean = () => false;
let removedFrom: (store: string) => void = () => {};
let patched = false;

/** A disk without room for these databases, until `whenRemoved` says that what was taken away is enough. */
export function fillDisk(databases: readonly string[], whenRemoved: (store: string) => boolean): { empty: () => void } {
  patch();
  const empty = () => (isFull = () => false);
  isFull = (database) => databases.includes(database);
  removedFrom = (store) => {
    if (whenRemoved(store)) empty();
  };
  return { empty };
}

/** fake-indexeddb has no quota: its stores are taught one. Like Chromium, it always takes deletions. */
function patch(): void {
  if (patched) return;
  patched = true;
  for (const name of ['put', 'add'] as const) {
    const write = IDBObjectStore.prototype[name];
    IDBObjectStore.prototype[name] = function (this: IDBObjectStore, ...words: Parameters<typeof write>) {
      if (isFull(this.transaction.db.name)) throw new DOMException('The disk is full.', 'QuotaExceededError');
      return write.apply(this, words);
    };
  }
  for (const name of ['delete', 'clear'] as const) {
    const remove = IDBObjectStore.prototype[name] as (...words: unknown[]) => IDBRequest;
    IDBObjectStore.prototype[name] = function (this: IDBObjectStore, ...words: unknown[]) {
      removedFrom(this.name);
      return remove.apply(this, words);
    } as never;
  }
}
