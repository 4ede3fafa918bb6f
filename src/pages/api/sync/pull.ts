import type { APIRoute } from 'astro';
import { v7 as randomId } from 'uuid';
import { pullCursor } from '#contract/pull.ts';
import { readReport } from '#contract/station-report.ts';
import { database } from '#server/db/connection.ts';
import { HttpProblem } from '#server/http/http-problem.ts';
import { keepReport } from '#server/sync/keep-report.ts';
import { PageStore } from '#server/sync/page-store.ts';
import { pullPage } from '#server/sync/pull-changes.ts';

const LARGEST_PAGE = 2000;
const UUID = /^[0-9a-f-]{36}$/;

const pages = new PageStore();

export const GET: APIRoute = async ({ locals, url }) => {
  const { station } = locals;
  if (station === undefined) throw new HttpProblem(401, 'no-station', 'No station', 'Sign in on this device first.');
  const cursor = pullCursor.safeParse(url.searchParams.get('cursor') ?? '');
  if (!cursor.success) throw new HttpProblem(400, 'bad-cursor', 'Bad cursor', 'Start again without a cursor.');
  const limit = Math.min(LARGEST_PAGE, Math.max(1, Number(url.searchParams.get('limit')) || 500));
  const install = url.searchParams.get('install') ?? '';
  const installId = UUID.test(install) ? install : undefined;
  const request = { cursor: cursor.data, limit, installId, now: new Date() };
  const report = readReport(url.searchParams.get('report'));
  if (installId !== undefined && report !== undefined)
    await keepReport(database(), station, installId, report, { now: () => new Date(), randomId });
  const page = await pullPage(database(), station.shopId, request, pages);
  return new Response(page, { headers: { 'content-type': 'application/json' } });
};
