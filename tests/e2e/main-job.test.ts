import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import pg from 'pg';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { launchBrowser } from './support/browser.ts';
import { decodePicture, drawPdf, filmPicture } from './support/label-picture.ts';
import { readPlanned, signInOn, toMilligrams, typeReading } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'main-job-'));
const PHONE = { viewport: { width: 390, height: 844 } };

let browser: Browser;
let mixer: BrowserContext;
let database: pg.Client;
let page: Page;
let code = '';
/** Milligrams as typed, in the order of weighing. */
const typed: number[] = [];

beforeAll(async () => {
  browser = await launchBrowser();
  mixer = await browser.newContext(PHONE);
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
});
afterAll(async () => {
  await browser.close();
  await database.end();
  fs.rmSync(folder, { recursive: true, force: true });
});

describe('the main job', () => {
  test('a mixer signs in, loses the network, and a new tab opens all the same', async () => {
    const first = await signInOn(mixer, baseUrl, 'mixer');
    await mixer.setOffline(true);
    await first.close();
    page = await mixer.newPage();
    await page.goto(baseUrl);
    await page.getByRole('link', { name: 'Mix' }).waitFor();
  });

  test('850 g of a formula uses up at least one leftover', async () => {
    await page.getByRole('link', { name: 'Mix' }).click();
    await page.getByRole('searchbox').fill('harbour dusk');
    await page.getByRole('link', { name: /Harbour dusk/ }).click();
    await page.getByLabel('Batch mass in grams').fill('850');
    await page.getByRole('region', { name: 'Use up' }).waitFor();
    await page.getByRole('button', { name: 'Weigh in 850.0 g' }).click();
    await page.getByText('Step 1 of').waitFor();
    expect(await page.locator('.step h2').textContent()).toContain('Leftover');
  });

  test('a tab that is killed in the middle comes back at the same step', async () => {
    await logAsPlanned();
    await page.getByText('Step 2 of').waitFor();
    const before = await page.locator('.step').textContent();
    await page.close({ runBeforeUnload: false });
    page = await mixer.newPage();
    await page.goto(baseUrl);
    await page.getByRole('link', { name: /Harbour dusk Step 2 of/ }).click();
    await page.getByText('Step 2 of').waitFor();
    expect(await page.locator('.step').textContent()).toBe(before);
  });

  test('an overshoot is repaired by growing the batch, and the rest is weighed to its end', async () => {
    const over = (await readPlanned(page)) + 40_000;
    for (const key of (over / 1000).toFixed(1)) await page.keyboard.press(key);
    await page.getByRole('button', { name: /^Log / }).click();
    await page.getByRole('alert').getByText('Overshot').waitFor();
    typed.push(over);
    await page.getByRole('button', { name: /Grow the batch/ }).click();
    await page.getByText('Step 3 of').waitFor();
    for (let steps = 0; steps < 12 && (await page.locator('.step').count()) > 0; steps++) await logAsPlanned();
    await page.getByText('in the pot').waitFor();
    const total = typed.reduce((sum, mg) => sum + mg, 0);
    expect(total).toBeGreaterThan(850_000);
    expect(toMilligrams((await page.getByText('in the pot').textContent()) ?? '')).toBe(total);
  });

  test('the batch is released and its label decodes from the printed page', async () => {
    await page.getByRole('radio', { name: 'Daylight D65' }).click();
    await page.getByRole('button', { name: 'Release and label' }).click();
    await page.waitForURL('**/label?tub=*');
    code = new URL(page.url()).searchParams.get('tub') ?? '';
    await page.getByRole('button', { name: 'Print 1 label' }).waitFor();
    const pdf = path.join(folder, 'label.pdf');
    await page.pdf({ path: pdf, preferCSSPageSize: true });
    for (const dpi of [203, 300]) {
      expect(decodePicture(drawPdf(pdf, dpi))).toBe(`${baseUrl}/b/${code}`.toUpperCase());
    }
  });

  test('the Shift page shows one log waiting', async () => {
    await page.goto(`${baseUrl}/shift`);
    await expect.poll(() => waiting(page)).toBe('1');
  });

  test('with the network back the rows in PostgreSQL equal what was weighed', async () => {
    await mixer.setOffline(false);
    await page.getByRole('button', { name: 'Send now' }).click();
    await expect.poll(() => waiting(page), { timeout: 30_000 }).toBe('0');
    const additions = await database.query<{ actual_mg: string }>(
      `select a.actual_mg from additions a join buckets b on b.shop_id = a.shop_id and b.batch_id = a.batch_id
       where b.code = $1 order by a.n`,
      [code],
    );
    expect(additions.rows.map((row) => Number(row.actual_mg))).toEqual(typed);
    const bucket = await balanceOf(code);
    expect(bucket).toEqual({ balance: typed.reduce((sum, mg) => sum + mg, 0), moved: bucket.balance });
  });

  test('an operator films the label, and returns the leftover by gross weight', async () => {
    const video = filmPicture(path.join(folder, 'label-203.ppm'));
    const withCamera = await launchBrowser(video);
    try {
      const operator = await withCamera.newContext({ ...PHONE, permissions: ['camera'] });
      const press = await signInOn(operator, baseUrl, 'operator');
      await press.goto(`${baseUrl}/scan`);
      await press.waitForURL(`**/b/${code}`, { timeout: 60_000 });
      await press.getByRole('heading', { name: 'Harbour dusk' }).waitFor();
      const net = 312_400;
      await returnTub(press, net + (await tareOf(code)));
      await expect.poll(async () => (await balanceOf(code)).balance, { timeout: 30_000 }).toBe(net);
      expect((await balanceOf(code)).moved).toBe(net);
      await press.goto(`${baseUrl}/b/${code}`);
      await press.getByText('312.4').first().waitFor();
    } finally {
      await withCamera.close();
    }
  });

  test("the mixer's phone agrees after its next exchange", async () => {
    await page.getByRole('button', { name: 'Send now' }).click();
    await page.goto(`${baseUrl}/b/${code}`);
    await page.getByText('312.4').first().waitFor({ timeout: 40_000 });
  });
});

async function logAsPlanned(): Promise<void> {
  const planned = await readPlanned(page);
  const shown = async () => (await page.locator('.step').allTextContents())[0] ?? '';
  const step = await shown();
  typed.push(planned);
  await typeReading(page, planned);
  await expect.poll(shown).not.toBe(step);
}

function waiting(on: Page): Promise<string | null> {
  return on.locator('[data-count=waiting]').textContent();
}

async function returnTub(on: Page, grossMg: number): Promise<void> {
  await on.getByRole('button', { name: 'Return' }).click();
  await on.getByLabel('Gross in g, no lid').fill((grossMg / 1000).toFixed(1));
  await on.getByRole('radio', { name: 'Lint' }).click();
  await on.getByRole('button', { name: /^Return / }).click();
  await on.getByText(/Returned 312\.4 g/).waitFor();
}

async function balanceOf(tub: string): Promise<{ balance: number; moved: number }> {
  const { rows } = await database.query<{ balance: string; moved: string }>(
    `select b.balance_mg as balance, sum(m.delta_mg) as moved
     from buckets b join movements m on m.shop_id = b.shop_id and m.bucket_id = b.id
     where b.code = $1 group by b.balance_mg`,
    [tub],
  );
  return { balance: Number(rows[0]?.balance), moved: Number(rows[0]?.moved) };
}

async function tareOf(tub: string): Promise<number> {
  const { rows } = await database.query<{ tare_mg: string }>('select tare_mg from buckets where code = $1', [tub]);
  return Number(rows[0]?.tare_mg);
}
