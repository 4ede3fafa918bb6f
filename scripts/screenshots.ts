import fs from 'node:fs';
import path from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { launchBrowser } from '#tests/e2e/support/browser.ts';
import { readPlanned, signInOn, typeReading } from '#tests/e2e/support/station-page.ts';

const SIZES = {
  phone: { width: 390, height: 844 },
  tablet: { width: 1024, height: 768 },
  desk: { width: 1440, height: 900 },
} as const;
const baseUrl = process.argv[2] ?? 'http://127.0.0.1:4321';
const folder = path.resolve(process.argv[3] ?? 'src/assets/screenshots');

/** Walks the main job on a running demo shop and keeps a picture of each screen: npm run screenshots -- URL [FOLDER] */
async function takeScreenshots(browser: Browser, size: keyof typeof SIZES, theme: 'station' | 'light'): Promise<void> {
  const context = await browser.newContext({ viewport: SIZES[size] });
  const page = await signInOn(context, baseUrl, 'mixer');
  await page.evaluate((name) => localStorage.setItem('halfpail.theme', name), theme);
  const keep = async (name: string) => {
    await page.waitForTimeout(400);
    await requireFits(page, `${name} ${size}`);
    await page.screenshot({ path: path.join(folder, `${name}-${size}-${theme}.png`) });
  };
  await page.goto(baseUrl);
  await page.getByRole('heading', { name: 'Due next' }).waitFor();
  await keep('bench');
  await page.goto(`${baseUrl}/formulas`);
  await page.getByRole('searchbox').fill('dusk');
  await keep('formulas');
  await page.goto(`${baseUrl}/shelf`);
  await page.locator('a.row').first().waitFor();
  await keep('shelf');
  await page.locator('a.row').first().click();
  await page.waitForURL('**/b/*');
  await keep('tub');
  await page.goto(`${baseUrl}/mix`);
  await page.getByRole('searchbox').fill('harbour dusk');
  await page.getByRole('link', { name: /Harbour dusk/ }).click();
  await page.getByLabel('Batch mass in grams').fill('850');
  await page.getByRole('region', { name: 'Use up' }).waitFor();
  await keep('how-much');
  await page.getByRole('button', { name: /^Weigh in/ }).click();
  await page.getByText('Step 1 of').waitFor();
  const first = await readPlanned(page);
  for (const key of ((first * 0.6) / 1000).toFixed(1)) await page.keyboard.press(key);
  await keep('weigh-in');
  for (let n = 0; n < 6; n++) await page.keyboard.press('Backspace');
  await typeReading(page, first);
  await page.getByText('Step 2 of').waitFor();
  for (const key of (((await readPlanned(page)) + 45_000) / 1000).toFixed(1)) await page.keyboard.press(key);
  await page.getByRole('button', { name: /^Log / }).click();
  await page.getByText('Overshot').waitFor();
  await keep('overshot');
  await page.getByRole('button', { name: /Type the reading again/ }).click();
  await finishAndLabel(page, keep);
  await page.goto(`${baseUrl}/shift`);
  await page.getByRole('heading', { name: 'Waits on this device' }).waitFor();
  await keep('shift');
  await context.close();
}

async function finishAndLabel(page: Page, keep: (name: string) => Promise<void>): Promise<void> {
  for (let n = 0; n < 8; n++) await page.keyboard.press('Backspace');
  for (let n = 0; n < 9 && (await page.locator('.step').count()) > 0; n++) {
    await typeReading(page, await readPlanned(page));
    await page.waitForTimeout(300);
  }
  await page.getByText('in the pot').waitFor();
  await page.getByRole('radio', { name: 'Daylight D65' }).click();
  await keep('finish');
  await page.getByRole('button', { name: 'Release and label' }).click();
  await page.getByRole('button', { name: 'Print 1 label' }).waitFor();
  await keep('label');
}

/** Nothing may scroll sideways. */
async function requireFits(page: Page, where: string): Promise<void> {
  const over = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  if (over > 0) throw new Error(`${where} scrolls sideways by ${over} px.`);
}

fs.mkdirSync(folder, { recursive: true });
const browser = await launchBrowser();
try {
  for (const size of ['phone', 'tablet', 'desk'] as const) {
    for (const theme of ['station', 'light'] as const) await takeScreenshots(browser, size, theme);
  }
} finally {
  await browser.close();
}
