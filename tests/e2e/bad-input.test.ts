import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { launchBrowser } from './support/browser.ts';
import { signInOn } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
let browser: Browser;
let page: Page;
const violations: string[] = [];

beforeAll(async () => {
  browser = await launchBrowser();
  page = await signInOn(await browser.newContext({ viewport: { width: 390, height: 844 } }), baseUrl, 'mixer');
  page.on('console', (message) => {
    if (/Content.Security.Policy/i.test(message.text())) violations.push(message.text());
  });
});
afterAll(() => browser.close());

test.each(['0', '-5', '1e9', 'abc', '1.234', '1,234', '850.05', '99999999'])(
  'a batch of "%s" is not weighed in, and the screen says why',
  async (text) => {
    await page.goto(`${baseUrl}/mix`);
    await page.getByRole('searchbox').fill('harbour dusk');
    await page.getByRole('link', { name: /Harbour dusk/ }).click();
    const mass = page.getByLabel('Batch mass in grams');
    await mass.fill(text);
    await expect.poll(() => page.locator('#amount-problem').textContent()).not.toBe('');
    expect(await page.getByRole('button', { name: /^Weigh in/ }).isDisabled()).toBe(true);
    expect(await mass.inputValue()).toBe(text);
  },
);

test.each([
  ['MN7W-YDF', 'A tub code has 8 characters'],
  ['MN7W-YDFO', 'never use “O”'],
  ['MN7W-YDF6', 'check character'],
])('the code "%s" is refused with the rule that it breaks', async (code, rule) => {
  await page.goto(`${baseUrl}/scan`);
  await page.getByLabel('Tub code').fill(code);
  await page.keyboard.press('Enter');
  await page.getByText(rule).first().waitFor();
});

test('a push whose wrapper cannot be read answers 422 with a problem document', async () => {
  const answer = await page.evaluate(async () => {
    const headers = { 'content-type': 'application/json' };
    const response = await fetch('/api/sync/push', { method: 'POST', headers, body: '{"protocol":1,"ops":"none"}' });
    return { status: response.status, type: response.headers.get('content-type'), body: await response.text() };
  });
  expect(answer.status).toBe(422);
  expect(answer.type).toBe('application/problem+json');
  expect(JSON.parse(answer.body)).toMatchObject({ status: 422, code: 'unreadable' });
});

test('a wrong password is refused in words and keeps the e-mail', async () => {
  const other = await (await browser.newContext()).newPage();
  await other.goto(`${baseUrl}/sign-in`);
  await other.getByLabel('E-mail').fill('mixer@siltlane.example.test');
  await other.getByLabel('Password').fill('not the phrase');
  await other.getByRole('button', { name: 'Sign in' }).click();
  await other.getByText('E-mail or password is wrong. Try again.').waitFor();
  expect(await other.getByLabel('E-mail').inputValue()).toBe('mixer@siltlane.example.test');
});

test('no page broke its content security policy', () => {
  expect(violations).toEqual([]);
});
