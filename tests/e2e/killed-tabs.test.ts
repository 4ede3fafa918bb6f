import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import type { Page, Route } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { type KillableBrowser, crashTab, launchKillable } from './support/killable-browser.ts';
import { signInOn } from './support/station-page.ts';

const ROUNDS = Number(process.env['TAB_KILLS'] ?? 10);
/** The demo's second shop: the first one's shelf is other tests'. */
const ROLE = 'mixer of the second shop';
const baseUrl = inject('baseUrl');
const profile = fs.mkdtempSync(path.join(os.tmpdir(), 'killed-tabs-'));

/** Where the entry is when its tab dies. */
const MOMENTS = ['being written', 'on its way to the server', 'stored, and the answer on its way back'] as const;
type Moment = (typeof MOMENTS)[number];

let browser: KillableBrowser;
let database: pg.Client;
let tub: { id: string; code: string; tareMg: number; netMg: number };

/** An entry by what the scale showed: each weighing here is of another mass. */
interface Typed {
  grossMg: number;
  netMg: number;
  shown: boolean;
}
const typed: Typed[] = [];
const count = { tabs: 0, browsers: 0 };

beforeAll(async () => {
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
  tub = await findTub();
  browser = await launchKillable(profile);
  await signInOn(browser.context, baseUrl, ROLE);
  // Closed by hand once, so that the sign-in is in the profile.
  await browser.close();
  browser = await launchKillable(profile);
});
afterAll(async () => {
  await browser?.kill();
  await database.end();
  fs.rmSync(profile, { recursive: true, force: true, maxRetries: 5 });
});

test(
  `${ROUNDS} tabs and browsers killed between write and acknowledgement: all that was shown as saved is there once`,
  async () => {
    for (let round = 0; round < ROUNDS; round++) {
      const moment = MOMENTS[round % MOMENTS.length] as Moment;
      await killAt(moment, round);
      const found = await findEntries(await openAgain());
      expect(judge(found), `after round ${round}, killed while ${moment}`).toEqual({ lost: 0, doubled: 0 });
    }
    const found = await settle();
    const saved = typed.filter(({ shown }) => shown);
    const figures = judge(found);
    console.log(
      `Killed ${count.tabs} tabs and ${count.browsers} browsers: ${typed.length} entries typed, ${saved.length} shown as ` +
        `saved, ${found.length} found; ${figures.lost} lost, ${figures.doubled} doubled`,
    );
    expect(figures).toEqual({ lost: 0, doubled: 0 });
    expect(saved.length).toBeGreaterThanOrEqual(Math.floor((ROUNDS * 2) / 3));
    expect(found.filter(({ place }) => place === 'outbox')).toEqual([]);
    expect(await balanceOf(tub.id)).toBe(lastOf(found).netMg);
  },
  120_000 + ROUNDS * 30_000,
);

/** One weighing, and the end of its tab at that moment; every second time of the whole browser. */
async function killAt(moment: Moment, round: number): Promise<void> {
  const page = await browser.context.newPage();
  await page.goto(`${baseUrl}/b/${tub.code}`);
  await page.getByRole('button', { name: 'Re-weigh' }).click();
  const entry = { netMg: tub.netMg - 100 * (typed.length + 1), grossMg: 0, shown: false };
  entry.grossMg = tub.tareMg + entry.netMg;
  typed.push(entry);
  const pushes = await holdPushes(page, moment, entry);
  await page.getByLabel('Gross in g').fill((entry.grossMg / 1000).toFixed(1));
  await page.getByRole('button', { name: /^Record / }).click();
  const told = page.getByText(`Re-weighed: ${(entry.netMg / 1000).toFixed(1)} g.`);
  if (moment === 'being written') {
    await sleep((round * 7) % 40);
    entry.shown = await told.isVisible();
  } else {
    await told.waitFor();
    entry.shown = true;
    await pushes.held;
  }
  if (round % 2 === 0) {
    await crashTab(page);
    count.tabs += 1;
    return;
  }
  await browser.kill();
  count.browsers += 1;
  browser = await launchKillable(profile);
}

/** Holds this tab's push of the entry at the moment. @returns `held` ends when it is there */
async function holdPushes(page: Page, moment: Moment, entry: Typed): Promise<{ held: Promise<void> }> {
  let reached = () => {};
  const held = new Promise<void>((resolve) => (reached = resolve));
  await page.route('**/api/sync/push', async (route: Route) => {
    const carries = route.request().postData()?.includes(`"grossMg":${entry.grossMg},`);
    if (moment === 'being written' || carries !== true) return route.continue();
    if (moment === 'on its way to the server') return reached();
    const answer = await route.fetch();
    expect(answer.status()).toBe(200);
    reached();
  });
  return { held };
}

async function openAgain(): Promise<Page> {
  for (const page of browser.context.pages()) await page.close();
  const page = await browser.context.newPage();
  await page.goto(`${baseUrl}/shift`);
  await page.getByRole('button', { name: /Send/ }).first().waitFor();
  return page;
}

/** Until nothing waits on the device. */
async function settle(): Promise<Found[]> {
  const page = await openAgain();
  await page.getByRole('button', { name: 'Send now' }).click();
  await expect.poll(() => page.locator('[data-count=waiting]').textContent(), { timeout: 60_000 }).toBe('0');
  return findEntries(page);
}

interface Found {
  opId: string;
  grossMg: number;
  deviceSeq: number;
  netMg: number;
  place: 'log' | 'quarantine' | 'outbox';
}

/** These weighings wherever they are: those that wait on the device, and those that the server has. */
async function findEntries(page: Page): Promise<Found[]> {
  const waiting = await page.evaluate(readOutbox);
  const known = new Set(typed.map(({ grossMg }) => grossMg));
  const { rows } = await database.query<{ place: 'log' | 'quarantine'; envelope: Envelope }>(
    `select 'log' as place, envelope from operations where type = 'bucket-recounted'
     union all select 'quarantine', raw from quarantine where raw->>'type' = 'bucket-recounted'`,
  );
  const all = [...rows, ...waiting.map((envelope) => ({ place: 'outbox' as const, envelope }))];
  return all
    .filter(({ envelope: { body } }) => body.bucketId === tub.id && known.has(body.grossMg))
    .map(({ place, envelope: { opId, deviceSeq, body } }) => {
      const { grossMg, tareMg } = body;
      return { opId, deviceSeq, grossMg, netMg: grossMg - tareMg, place };
    });
}

interface Envelope {
  opId: string;
  deviceSeq: number;
  body: { bucketId: string; grossMg: number; tareMg: number };
}

/** Runs in the page: what waits in this browser's outbox. */
async function readOutbox(): Promise<Envelope[]> {
  const asked = <T>(request: IDBRequest<T>) =>
    new Promise<T>((resolve, reject) => {
      request.addEventListener('success', () => resolve(request.result));
      request.addEventListener('error', () => reject(request.error));
    });
  const names = (await indexedDB.databases()).flatMap(({ name }) => (name?.startsWith('halfpail-outbox-') ? name : []));
  const waiting: Envelope[] = [];
  for (const name of names) {
    const outbox = await asked(indexedDB.open(name));
    const ops = await asked(outbox.transaction('ops').objectStore('ops').getAll());
    outbox.close();
    for (const { status, operation } of ops)
      if (status === 'waiting' && operation.type === 'bucket-recounted') waiting.push(operation);
  }
  return waiting;
}

/** Lost: shown as saved and nowhere. Doubled: one weighing as two entries, or an entry in the log and refused as well. */
function judge(found: readonly Found[]): { lost: number; doubled: number } {
  const of = (grossMg: number) => found.filter((entry) => entry.grossMg === grossMg);
  const lost = typed.filter(({ shown, grossMg }) => shown && of(grossMg).length === 0);
  const doubled = typed.filter(({ grossMg }) => {
    const entries = of(grossMg);
    const onServer = entries.filter(({ place }) => place !== 'outbox');
    return new Set(entries.map(({ opId }) => opId)).size > 1 || onServer.length > 1;
  });
  return { lost: lost.length, doubled: doubled.length };
}

const lastOf = (found: readonly Found[]) =>
  found.reduce((last, entry) => (entry.deviceSeq > last.deviceSeq ? entry : last));

async function findTub(): Promise<typeof tub> {
  const { rows } = await database.query<{ id: string; code: string; tare_mg: string; balance_mg: string }>(
    `select b.id, b.code, b.tare_mg, b.balance_mg from buckets b join people p on p.shop_id = b.shop_id
     join identities i on i.id = p.identity_id
     where i.email_lower = $1 and b.state = 'shelf' and b.balance_mg > 200000 and not b.needs_recount
     order by b.code limit 1`,
    [demoSignIns.find(({ role }) => role === ROLE)?.email],
  );
  const [row] = rows;
  if (row === undefined) throw new Error('No tub on the shelf of the second shop.');
  const netMg = 100 * Math.floor(Number(row.balance_mg) / 100);
  return { id: row.id, code: row.code, tareMg: Number(row.tare_mg), netMg };
}

async function balanceOf(id: string): Promise<number> {
  const { rows } = await database.query<{ balance: string; moved: string }>(
    `select b.balance_mg as balance, (select sum(delta_mg) from movements m where m.bucket_id = b.id) as moved
     from buckets b where b.id = $1`,
    [id],
  );
  expect(rows[0]?.moved).toBe(rows[0]?.balance);
  return Number(rows[0]?.balance);
}
