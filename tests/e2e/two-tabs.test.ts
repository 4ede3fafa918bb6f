import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { launchBrowser } from './support/browser.ts';
import { readPlanned, signInOn, typeReading } from './support/station-page.ts';

const baseUrl = inject('baseUrl');

let browser: Browser;
let station: BrowserContext;
let first: Page;
let second: Page;

beforeAll(async () => {
  browser = await launchBrowser();
  station = await browser.newContext({ viewport: { width: 390, height: 844 } });
  first = await signInOn(station, baseUrl, 'mixer');
  second = await station.newPage();
  await second.goto(baseUrl);
  await second.getByRole('heading', { name: 'Due next' }).waitFor();
}, 120_000);
afterAll(async () => browser.close());

const waiting = (page: Page) => page.locator('[data-count="waiting"]').textContent();

/** Opens 850 g of a formula in this tab, and gives the address of its steps. */
async function openBatch(page: Page): Promise<string> {
  await page.goto(baseUrl);
  await page.getByRole('link', { name: 'Mix' }).click();
  await page.getByRole('searchbox').fill('harbour dusk');
  await page.getByRole('link', { name: /Harbour dusk/ }).click();
  await page.getByLabel('Batch mass in grams').fill('850');
  await page.getByRole('button', { name: 'Weigh in 850.0 g' }).click();
  await page.getByText('Step 1 of').waitFor();
  return page.url();
}

test('one sync run at a time: while a tab is at it, no other sends or fetches', async () => {
  let running = 0;
  let most = 0;
  let asked = 0;
  await station.route('**/api/sync/**', async (route) => {
    asked += 1;
    most = Math.max(most, ++running);
    await new Promise((resolve) => setTimeout(resolve, 400));
    running -= 1;
    await route.continue();
  });
  await Promise.all([first, second].map((page) => page.goto(`${baseUrl}/shift`)));
  for (const page of [first, second]) await page.getByRole('button', { name: 'Send now' }).click();
  await expect.poll(() => asked).toBeGreaterThan(0);
  await first.waitForTimeout(1_500);
  await station.unroute('**/api/sync/**');
  expect(most).toBe(1);
});

test('an entry of one tab shows in the other without a reload', async () => {
  await station.setOffline(true);
  await second.goto(`${baseUrl}/shift`);
  await expect.poll(() => waiting(second)).toBe('0');
  await first.goto(`${baseUrl}/shelf`);
  await first.locator('a[href^="/b/"]').first().click();
  await discardTub(first);
  await expect.poll(() => waiting(second), { timeout: 20_000 }).toBe('1');
  await station.setOffline(false);
  await second.getByRole('button', { name: 'Send now' }).click();
  await expect.poll(() => waiting(second), { timeout: 30_000 }).toBe('0');
});

test('two tabs that weigh the same batch: the second sees the step of the first, and is told so', async () => {
  const address = await openBatch(first);
  await second.goto(address);
  await second.getByText('Step 1 of').waitFor();
  await typeReading(first, await readPlanned(first));
  await first.getByText('Step 2 of').waitFor();
  await second.getByText('Step 2 of').waitFor();
  await second.getByRole('alert').getByText('went on in another tab').waitFor();
  expect(await first.getByText('went on in another tab').count()).toBe(0);
  expect(await second.locator('.step').textContent()).toBe(await first.locator('.step').textContent());
});

async function discardTub(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Discard' }).click();
  await page.getByRole('radio', { name: 'Dried or gelled' }).click();
  await page.getByRole('button', { name: 'Discard for good' }).click();
  await page.getByText('Discarded.').waitFor();
}
