import { problem } from '#contract/problem.ts';
import { type PullResponse, pullResponse } from '#contract/pull.ts';
import { type TableName, rows, tableNames } from '#contract/rows.ts';
import type { Cache } from './cache.ts';
import { clearCache } from './clear-cache.ts';
import { measureClock } from './clock.ts';
import { reportStation } from './report-station.ts';
import type { Station } from './station.ts';
import { type SyncDeps, type SyncResult, refusalOf } from './sync-result.ts';

export interface LoadProgress {
  done: number;
  /** Null until the server has counted. */
  total: number | null;
  bytes: number;
}

const PAGE = 1000;

/**
 * Pulls pages from the cursor until there is no more, and writes them at once: in between, a row may hold less than the
 * position says. A load from the beginning is written page by page and reports its progress; nothing is shown of it yet.
 */
export async function pullChanges(
  station: Station,
  deps: SyncDeps,
  onProgress: (progress: LoadProgress) => void,
): Promise<SyncResult> {
  const progress: LoadProgress = { done: 0, total: null, bytes: 0 };
  let startedOver = false;
  let pages: PullResponse[] = [];
  let from = '';
  for (;;) {
    const position = await station.cache.meta.get('position');
    const first = (position?.completeAt ?? null) === null;
    const report = pages.length === 0 ? await reportStation(station) : undefined;
    const page = await fetchPage(station, pages.at(-1)?.cursor ?? position?.cursor ?? '', report, deps);
    if ('kind' in page) return page;
    if (page.refetch) {
      if (startedOver) return { kind: 'failed', problem: 'The shop cannot be loaded just now.', retryAfterMs: null };
      await startOver(station);
      startedOver = true;
      pages = [];
      continue;
    }
    if (pages.length === 0) from = position?.cursor ?? '';
    pages.push(page.answer);
    if (first || !page.answer.more) {
      await settleOwn(station, pages, deps.now());
      await writePages(station.cache, from, pages, position?.completeAt ?? null, deps.now());
      pages = [];
    }
    progress.done += page.answer.changes.length;
    progress.bytes += page.bytes;
    if (page.answer.remaining !== null) progress.total = progress.done + page.answer.remaining;
    if (first) onProgress({ ...progress });
    if (!page.answer.more) return { kind: 'done' };
  }
}

type Page = { refetch: false; answer: PullResponse; bytes: number } | { refetch: true };

async function fetchPage(
  station: Station,
  cursor: string,
  report: string | undefined,
  deps: SyncDeps,
): Promise<Page | SyncResult> {
  const query = new URLSearchParams({ cursor, limit: String(PAGE), install: station.installId });
  if (report !== undefined) query.set('report', report);
  const askedAt = deps.now();
  const response = await deps.fetch(`/api/sync/pull?${query}`).catch(() => undefined);
  if (response === undefined) return { kind: 'offline' };
  if (response.status === 409 && (await codeOf(response)) === 'must-refetch') return { refetch: true };
  const refusal = await refusalOf(response, deps.now());
  if (refusal !== null) return refusal;
  const text = await response.text().catch(() => '');
  const answer = pullResponse.safeParse(parseJson(text));
  if (!answer.success)
    return { kind: 'failed', problem: 'The answer was cut off. It tries again.', retryAfterMs: null };
  if (report !== undefined) await measureClock(station.outbox, answer.data.serverTime, askedAt, deps.now());
  return { refetch: false, answer: answer.data, bytes: new TextEncoder().encode(text).length };
}

/** Own operations that the rows contain count as sent, whether or not the answer to their push arrived. */
async function settleOwn(station: Station, pages: readonly PullResponse[], now: Date): Promise<void> {
  const { ops } = station.outbox;
  await station.outbox.transaction('rw', ops, async () => {
    for (const { opId, changeSeq } of pages.flatMap(({ own }) => own)) {
      const entry = await ops.get(opId);
      if (entry?.status !== 'waiting') continue;
      await ops.update(opId, { status: 'sent', changeSeq, sentAt: entry.sentAt ?? now.toISOString() });
    }
  });
}

/** Rows and position in one transaction: never one without the other. A row that came twice counts as it came last. */
async function writePages(
  cache: Cache,
  from: string,
  pages: readonly PullResponse[],
  completeAt: string | null,
  now: Date,
): Promise<void> {
  const last = pages.at(-1);
  if (last === undefined) return;
  const latest = new Map(pages.flatMap(({ changes }) => changes).map((change) => [change.table + change.id, change]));
  const tables = tableNames.map((name) => cache.rows(name));
  await cache.transaction('rw', [...tables, cache.meta], async () => {
    // Rows were freed meanwhile: only a pull from there brings them back.
    if (((await cache.meta.get('position'))?.cursor ?? '') !== from) return;
    for (const name of tableNames) {
      const changes = [...latest.values()].filter((change) => change.table === name);
      const gone = changes.flatMap((change) => ('deleted' in change ? [change.id] : []));
      const kept = changes.flatMap((change) => ('row' in change ? [rowOf(name, change.row)] : []));
      if (gone.length > 0) await cache.rows(name).bulkDelete(gone);
      if (kept.length > 0) await cache.table(name).bulkPut(kept);
    }
    await cache.meta.put({
      name: 'position',
      cursor: last.cursor,
      seq: last.seq,
      completeAt: completeAt ?? (last.more ? null : now.toISOString()),
    });
  });
}

function rowOf(name: TableName, row: unknown): unknown {
  return rows[name].parse(row);
}

/**
 * Another state of the server: rows are pulled anew, and what was sent waits again until the rows list it as own or the
 * push answers `duplicate`, or refuses it as before, so that a restored database gets back what it lost.
 */
async function startOver({ cache, outbox }: Station): Promise<void> {
  await outbox.ops
    .where('status')
    .anyOf('sent', 'rejected')
    .modify({ status: 'waiting', changeSeq: null, problem: null });
  await clearCache(cache);
}

async function codeOf(response: Response): Promise<string | undefined> {
  const parsed = problem.safeParse(
    await response
      .clone()
      .json()
      .catch(() => undefined),
  );
  return parsed.success ? parsed.data.code : undefined;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
