import { pullResponse, type PullResponse } from '#contract/pull.ts';
import type { BenchStation } from '#scripts/bench/sync-stations.ts';

/** One page as a station asks for it. @throws Error when it is not given */
export async function pullPage(
  baseUrl: string,
  station: BenchStation,
  cursor: string,
  limit: number,
): Promise<PullResponse> {
  const query = new URLSearchParams({ cursor, limit: String(limit), install: station.installId });
  const headers = { Cookie: `station=${station.cookie}` };
  const response = await fetch(`${baseUrl}/api/sync/pull?${query}`, { headers });
  if (!response.ok) throw new Error(`The pull was answered ${response.status}: ${await response.text()}`);
  return pullResponse.parse(await response.json());
}

interface From {
  cursor: string;
  limit: number;
  /** Rows by table and id, brought up to date. */
  shelf: Map<string, unknown>;
}

/** Page after page until there is no more. */
export async function pullAll(
  baseUrl: string,
  station: BenchStation,
  { cursor, limit, shelf }: From,
): Promise<{ cursor: string; pages: number }> {
  for (let pages = 1; ; pages++) {
    const page = await pullPage(baseUrl, station, cursor, limit);
    for (const change of page.changes) {
      if ('deleted' in change) shelf.delete(`${change.table} ${change.id}`);
      else shelf.set(`${change.table} ${change.id}`, change.row);
    }
    cursor = page.cursor;
    if (!page.more) return { cursor, pages };
  }
}
