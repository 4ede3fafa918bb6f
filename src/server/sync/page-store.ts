/** Characters that are kept in all; some twenty pages of two thousand rows. */
const MOST_CHARACTERS = 40_000_000;

export interface StoredPage {
  /** The changes as JSON text. */
  changes: string;
  last: { place: number; id: string; seq: number } | undefined;
  count: number;
}

/**
 * The last long pages of this process, by shop, epoch, the shop's change sequence, cursor and length: every write that
 * stations see counts that sequence up, so a page of one sequence is the same for all. When a whole shop comes back at
 * once, its stations ask for the same pages. A courtesy: another process, or this one without it, answers the same.
 */
export class PageStore {
  private readonly pages = new Map<string, StoredPage>();
  private readonly most: number;
  private characters = 0;

  constructor(most = MOST_CHARACTERS) {
    this.most = most;
  }

  find(key: string): StoredPage | undefined {
    return this.pages.get(key);
  }

  keep(key: string, page: StoredPage): void {
    if (this.pages.has(key) || page.changes.length > this.most) return;
    this.pages.set(key, page);
    this.characters += page.changes.length;
    for (const [oldest, { changes }] of this.pages) {
      if (this.characters <= this.most) break;
      this.pages.delete(oldest);
      this.characters -= changes.length;
    }
  }
}
