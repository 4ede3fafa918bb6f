import type { StationReport } from '#contract/station-report.ts';
import type { Database } from '#server/db/connection.ts';
import { type ShopTransaction, inShop } from '#server/db/in-shop.ts';

/** A clock that differs by more from what it was at the contact before has jumped. */
const JUMP_MS = 120_000;
/** Smaller differences are drift and the network's delay. */
const DRIFT_MS = 10_000;
/** Without news the row is written this seldom. */
const REFRESH_MS = 10 * 60_000;

interface Deps {
  now: () => Date;
  randomId: () => string;
}

/**
 * Remembers what a station has recorded and has not sent yet, so that a cleared browser can be told what it lost; a clock
 * that jumped since the last contact goes into the audit log, with the entries whose times it may have bent.
 */
export async function keepReport(
  db: Database,
  { shopId, stationId }: { shopId: string; stationId: string },
  installId: string,
  report: StationReport,
  deps: Deps,
): Promise<void> {
  await inShop(db, shopId, async (trx) => {
    const before = await findInstall(trx, shopId, stationId, installId);
    if (before === undefined) return;
    const now = deps.now();
    const offset = Number(before.clockOffsetMs ?? report.offsetMs);
    const moved = Math.abs(offset - report.offsetMs);
    const isNews = report.recorded > before.lastSeq || report.waiting !== before.pendingReported || moved > DRIFT_MS;
    const isOld = now.getTime() - (before.reportedAt?.getTime() ?? 0) > REFRESH_MS;
    if (!isNews && !isOld && before.clockOffsetMs !== null) return;
    await trx
      .updateTable('installs')
      .set((eb) => ({
        lastSeq: eb.fn<number>('greatest', ['lastSeq', eb.val(report.recorded)]),
        pendingReported: report.waiting,
        reportedAt: now,
        ...(before.clockOffsetMs === null || moved > DRIFT_MS ? { clockOffsetMs: report.offsetMs } : {}),
      }))
      .where('shopId', '=', shopId)
      .where('id', '=', installId)
      .execute();
    if (moved <= JUMP_MS) return;
    const detail = {
      station: stationId,
      installId,
      // The device's clock less the server's: a jump ahead is positive.
      jumpMs: offset - report.offsetMs,
      offsetBeforeMs: offset,
      offsetAfterMs: report.offsetMs,
      lastContact: before.reportedAt?.toISOString() ?? null,
      entries: { after: before.lastSeq - (before.pendingReported ?? 0), upTo: report.recorded },
    };
    await trx
      .insertInto('audit')
      .values({
        shopId,
        id: deps.randomId(),
        at: now,
        actorId: null,
        kind: 'clock-jump',
        detail: JSON.stringify(detail),
      })
      .execute();
  });
}

function findInstall(trx: ShopTransaction, shopId: string, stationId: string, installId: string) {
  return trx
    .selectFrom('installs')
    .select(['lastSeq', 'pendingReported', 'reportedAt', 'clockOffsetMs'])
    .where('shopId', '=', shopId)
    .where('stationId', '=', stationId)
    .where('id', '=', installId)
    .executeTakeFirst();
}
