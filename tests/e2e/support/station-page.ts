import type { BrowserContext, Page } from 'playwright-core';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';

/** Signs in on a fresh browser and waits until the shop is on the device and the app answers without a network. */
export async function signInOn(context: BrowserContext, baseUrl: string, role: string): Promise<Page> {
  const account = demoSignIns.find((entry) => entry.role === role);
  if (account === undefined) throw new Error(`No demo sign-in for ${role}.`);
  const page = await context.newPage();
  await page.goto(`${baseUrl}/sign-in`);
  await page.getByLabel('E-mail').fill(account.email);
  await page.getByLabel('Password').fill(account.password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { name: 'Bench' }).waitFor();
  await page.getByRole('heading', { name: 'Due next' }).waitFor();
  await page.evaluate(async () => {
    await navigator.serviceWorker.ready;
  });
  return page;
}

/** The number at the top of the step: what is planned, in mg. */
export async function readPlanned(page: Page): Promise<number> {
  return toMilligrams((await page.locator('.step .num').first().textContent()) ?? '');
}

export function toMilligrams(text: string): number {
  const grams = /-?\d+(?:\.\d+)?/.exec(text)?.[0];
  if (grams === undefined) throw new Error(`No mass in "${text}".`);
  return Math.round(Number(grams) * 1000);
}

/** Types a reading on the keyboard and logs it. */
export async function typeReading(page: Page, mg: number): Promise<void> {
  for (const key of (mg / 1000).toFixed(1)) await page.keyboard.press(key);
  await page.getByRole('button', { name: /^Log / }).click();
}
