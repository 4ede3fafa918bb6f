import { execFileSync } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import pg from 'pg';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { launchBrowser } from './support/browser.ts';
import { readPlanned, signInOn, typeReading } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
/** The demo's second shop: the first one's shelf is other tests'. */
const ROLE = 'mixer of the second shop';
const EMAIL = demoSignIns.find(({ role }) => role === ROLE)?.email;
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'shift-summary-'));

let browser: Browser;
let context: BrowserContext;
let page: Page;
let database: pg.Client;
const figure = (name: string) => page.locator(`[data-figure=${name}]`).textContent();
const kilograms = async (name: string) => Number.parseFloat((await figure(name)) ?? '');

beforeAll(async () => {
  browser = await launchBrowser();
  context = await browser.newContext({ viewport: { width: 390, height: 844 } });
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
  page = await signInOn(context, baseUrl, ROLE);
  await context.setOffline(true);
});
afterAll(async () => {
  await browser.close();
  await database.end();
  fs.rmSync(folder, { recursive: true, force: true });
});

test('without a network a batch that was just mixed is in the summary of today, and not of yesterday', async () => {
  await openSummary();
  const before = { batches: Number(await figure('batches')), mixed: await kilograms('mixed') };
  await page.getByRole('radio', { name: 'Yesterday' }).click();
  const yesterday = await figure('batches');
  await mixBatch(500);
  await openSummary();
  expect(Number(await figure('batches'))).toBe(before.batches + 1);
  expect(await kilograms('mixed')).toBeCloseTo(before.mixed + 0.5, 1);
  await page.getByRole('radio', { name: 'Yesterday' }).click();
  expect(await figure('batches')).toBe(yesterday);
  await page.getByRole('radio', { name: 'Today' }).click();
});

test('a time that ends before it begins is said, and what was typed stays', async () => {
  await page.getByRole('radio', { name: 'Other times' }).click();
  const to = page.getByRole('textbox', { name: 'To' });
  await to.fill('2026-01-01T06:00');
  await page.getByRole('alert').getByText('The shift ends before it begins').waitFor();
  expect(await to.inputValue()).toBe('2026-01-01T06:00');
  await page.getByRole('radio', { name: 'Today' }).click();
});

test('it prints on one page: the shop, the day, who, the figures and the note', async () => {
  await page.getByLabel('Note for the manager').fill('Base white runs out on Thursday.');
  const pdf = path.join(folder, 'summary.pdf');
  await page.pdf({ path: pdf, preferCSSPageSize: true });
  expect(execFileSync('pdfinfo', [pdf], { encoding: 'utf8' })).toMatch(/^Pages: +1$/m);
  const text = execFileSync('pdftotext', ['-layout', pdf, '-'], { encoding: 'utf8' });
  const { rows } = await database.query<{ name: string; person: string }>(
    `select s.name, p.display_name as person from shops s join people p on p.shop_id = s.id
     join identities i on i.id = p.identity_id where i.email_lower = $1`,
    [EMAIL],
  );
  for (const words of [rows[0]?.name, rows[0]?.person, 'Batches', 'Base white runs out on Thursday.', 'Still open'])
    expect(text).toContain(words);
  expect(text).not.toContain('Send to the manager');
});

test('handed in without a network it waits on this device, once however often the key is hit', async () => {
  await page.getByRole('button', { name: 'Send to the manager' }).dblclick();
  await page.getByText(/^On this device since/).waitFor();
  await page.getByRole('button', { name: 'Handed in' }).waitFor();
  await page.goto(`${baseUrl}/shift`);
  await page.getByText('Shift summary to the manager').first().waitFor();
  expect(await page.getByText('Shift summary to the manager').count()).toBe(1);
});

test('with the network back it is in the log and one job waits for its e-mail', async () => {
  await context.setOffline(false);
  await page.getByRole('button', { name: 'Send now' }).click();
  await expect.poll(() => page.locator('[data-count=waiting]').textContent(), { timeout: 30_000 }).toBe('0');
  const { rows } = await database.query<{ shop_id: string; op_id: string; data: unknown; note: string }>(
    `select o.shop_id, o.op_id, j.data, o.envelope->'body'->>'note' as note
     from operations o join pgboss.job j on j.id = o.op_id where o.type = 'shift-reported'`,
  );
  const [row] = rows;
  expect(rows).toHaveLength(1);
  expect(row).toMatchObject({
    data: { shopId: row?.shop_id, opId: row?.op_id },
    note: 'Base white runs out on Thursday.',
  });
});

async function openSummary(): Promise<void> {
  await page.goto(`${baseUrl}/shift`);
  await page.getByRole('link', { name: 'Shift summary' }).click();
  await page.getByRole('heading', { name: 'Still open' }).waitFor();
}

/** A formula as planned; so many grams. */
async function mixBatch(grams: number): Promise<void> {
  await page.goto(`${baseUrl}/mix`);
  const { rows } = await database.query<{ name: string }>(
    `select f.name from formulas f join people p on p.shop_id = f.shop_id join identities i on i.id = p.identity_id
     where i.email_lower = $1 and exists (select from formula_revisions r where r.shop_id = f.shop_id
       and r.formula_id = f.id and r.state = 'approved') order by f.code limit 1`,
    [EMAIL],
  );
  const name = rows[0]?.name ?? '';
  await page.getByRole('searchbox').fill(name);
  await page.getByRole('link', { name }).first().click();
  await page.getByLabel('Batch mass in grams').fill(String(grams));
  await page.getByRole('button', { name: /^Weigh in/ }).click();
  await page.getByText('Step 1 of').waitFor();
  for (let n = 0; n < 12 && (await page.locator('.step').count()) > 0; n++) {
    const step = await page.locator('.step').textContent();
    await typeReading(page, await readPlanned(page));
    await expect.poll(async () => (await page.locator('.step').allTextContents())[0]).not.toBe(step);
  }
  await page.getByText('in the pot').waitFor();
  await page.getByRole('radio', { name: 'Daylight D65' }).click();
  await page.getByRole('button', { name: 'Release and label' }).click();
  await page.waitForURL('**/label?tub=*');
}
