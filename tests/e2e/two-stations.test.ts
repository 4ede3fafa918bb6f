import pg from 'pg';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { launchBrowser } from './support/browser.ts';
import { signInOn } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
const PHONE = { viewport: { width: 390, height: 844 } };

let browser: Browser;
let database: pg.Client;
let stations: { context: BrowserContext; page: Page }[] = [];
let tub: { code: string; tareMg: number; balanceMg: number };

beforeAll(async () => {
  browser = await launchBrowser();
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
  tub = await aTubOnTheShelf();
  for (let n = 0; n < 2; n++) {
    const context = await browser.newContext(PHONE);
    stations.push({ context, page: await signInOn(context, baseUrl, 'mixer') });
  }
});
afterAll(async () => {
  await browser.close();
  await database.end();
});

const [first, second] = [
  () => stations[0] as (typeof stations)[number],
  () => stations[1] as (typeof stations)[number],
];
const task = (page: Page) =>
  page
    .getByRole('region', { name: 'Weigh again' })
    .getByRole('link', { name: `${tub.code.slice(0, 4)}-${tub.code.slice(4)}` });

test('two stations without a network spend the same tub, and neither sees the other', async () => {
  for (const [n, { context, page }] of stations.entries()) {
    await context.setOffline(true);
    await weigh(page, 'Return', tub.balanceMg - (n + 1) * 50_000);
    await page.goto(baseUrl);
    await page.getByRole('heading', { name: 'Due next' }).waitFor();
    expect(await task(page).count()).toBe(0);
  }
});

test('once both have sent, both show the task with its reason', async () => {
  for (const { context, page } of stations) {
    await context.setOffline(false);
    await send(page);
  }
  for (const { page } of stations) {
    await send(page);
    await page.goto(baseUrl);
    await task(page).waitFor();
    expect(await task(page).textContent()).toContain('Two devices used it, neither saw the other');
  }
  expect(await standOf(tub.code)).toEqual({ balanceMg: tub.balanceMg - 150_000, needsRecount: true });
});

test('one weighs it again: the task is gone on both, and the books hold what was weighed', async () => {
  const { page } = first();
  await task(page).click();
  await page.getByText('Two devices used it, neither saw the other. Re-weigh it.').waitFor();
  await weigh(page, 'Re-weigh', 123_400);
  await page.goto(baseUrl);
  await page.getByRole('heading', { name: 'Due next' }).waitFor();
  expect(await task(page).count()).toBe(0);
  for (const station of [first(), second()]) {
    await send(station.page);
    await station.page.goto(baseUrl);
    await station.page.getByRole('heading', { name: 'Due next' }).waitFor();
    await expect.poll(() => task(station.page).count(), { timeout: 40_000 }).toBe(0);
  }
  expect(await standOf(tub.code)).toEqual({ balanceMg: 123_400, needsRecount: false });
});

async function weigh(page: Page, act: 'Return' | 'Re-weigh', netMg: number): Promise<void> {
  await page.goto(`${baseUrl}/b/${tub.code}`);
  await page.getByRole('button', { name: act }).click();
  await page.getByLabel('Gross in g, no lid').fill(((tub.tareMg + netMg) / 1000).toFixed(1));
  if (act === 'Return') await page.getByRole('radio', { name: 'Clean' }).click();
  await page.getByRole('button', { name: act === 'Return' ? /^Return / : /^Record/ }).click();
  await page.getByText(act === 'Return' ? /^Returned / : /^Re-weighed: /).waitFor();
}

/** Sends what waits and fetches what others sent. */
async function send(page: Page): Promise<void> {
  await page.goto(`${baseUrl}/shift`);
  await page.getByRole('button', { name: 'Send now' }).click();
  await expect.poll(() => page.locator('[data-count=waiting]').textContent(), { timeout: 40_000 }).toBe('0');
}

async function aTubOnTheShelf() {
  const { rows } = await database.query<{ code: string; tare_mg: string; balance_mg: string }>(
    `select b.code, b.tare_mg, b.balance_mg from buckets b join people p on p.shop_id = b.shop_id
     join identities i on i.id = p.identity_id
     where i.email_lower = 'mixer@siltlane.example.test' and b.state = 'shelf' and b.released
       and b.balance_mg between 300000 and 800000 and not b.needs_recount order by b.code limit 1`,
  );
  const [row] = rows;
  if (row === undefined) throw new Error('No tub on the shelf of the demo shop.');
  return { code: row.code, tareMg: Number(row.tare_mg), balanceMg: Number(row.balance_mg) };
}

async function standOf(code: string) {
  const { rows } = await database.query<{ balance_mg: string; needs_recount: boolean }>(
    'select balance_mg, needs_recount from buckets where code = $1',
    [code],
  );
  return { balanceMg: Number(rows[0]?.balance_mg), needsRecount: rows[0]?.needs_recount };
}
