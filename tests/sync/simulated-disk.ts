const full = new Set<string>();
let patched = false;

/** The disk of one install: while it is full, every write to its databases fails as the browser's quota does. */
export function diskOf(installId: string): { setFull: (isFull: boolean) => void } {
  patch();
  return { setFull: (isFull) => void (isFull ? full.add(installId) : full.delete(installId)) };
}

/** fake-indexeddb has no quota: its stores are taught one. */
function patch(): void {
  if (patched) return;
  patched = true;
  for (const name of ['put', 'add'] as const) {
    const write = IDBObjectStore.prototype[name];
    IDBObjectStore.prototype[name] = function (this: IDBObjectStore, ...words: Parameters<typeof write>) {
      const database = this.transaction.db.name;
      if ([...full].some((installId) => database.endsWith(installId)))
        throw new DOMException('The disk is full.', 'QuotaExceededError');
      return write.apply(this, words);
    };
  }
}
