import fs from 'node:fs';
import pg from 'pg';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { launchBrowser } from './support/browser.ts';
import { signInOn } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
const JOB = 'T-4711';
let browser: Browser;
let context: BrowserContext;
let database: pg.Client;
let page: Page;
let shopId: string;
let codes: string[];

/** A job that the station knows and the server forgets: what is issued for it is refused. */
beforeAll(async () => {
  browser = await launchBrowser();
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
  const email = demoSignIns.find(({ role }) => role === 'mixer')?.email;
  [{ shop_id: shopId }] = (await database.query('select shop_id from find_sign_in($1)', [email])).rows as [never];
  await database.query(
    `with next as (update shop_sync set seq = seq + 1 where shop_id = $1 returning seq)
     insert into jobs (shop_id, id, number, customer, due, garment, compliance, change_seq)
     select $1, gen_random_uuid(), $2, 'Tray test', '2027-01-04T08:00:00Z', 'Shirt', '{}', seq from next`,
    [shopId, JOB],
  );
  const tubs = await database.query<{ code: string }>(
    `select code from buckets where shop_id = $1 and state = 'shelf' and released and deleted_at is null
     order by code limit 4`,
    [shopId],
  );
  codes = tubs.rows.map(({ code }) => code);
  context = await browser.newContext({ viewport: { width: 390, height: 844 } });
  page = await signInOn(context, baseUrl, 'mixer');
  await page.goto(`${baseUrl}/b/${codes[0]}?issue`);
  await page.getByLabel('Job').locator('option', { hasText: JOB }).waitFor({ state: 'attached' });
  await database.query('delete from jobs where shop_id = $1 and number = $2', [shopId, JOB]);
});
afterAll(async () => {
  await browser.close();
  await database.end();
});

const count = (of: 'waiting' | 'decide') => page.locator(`[data-count="${of}"]`).textContent();
const refused = () => page.getByRole('article', { name: /^Not accepted: Issued/ });

async function issueForLostJob(code: string | undefined): Promise<void> {
  await page.goto(`${baseUrl}/b/${code}?issue`);
  const job = page.getByLabel('Job');
  const option = await job.locator('option', { hasText: JOB }).getAttribute('value');
  await job.selectOption(option);
  await page.getByRole('button', { name: `Issue for ${JOB}` }).click();
  await page.getByText(`Issued for ${JOB}.`).waitFor();
}

async function openShift(): Promise<void> {
  await page.goto(`${baseUrl}/shift`);
  await page.getByRole('heading', { name: 'Waits on this device' }).waitFor();
}

/** Refusals of this shop that nobody settled. */
async function unsettled(): Promise<number> {
  const { rows } = await database.query(
    'select count(*)::int as n from quarantine where shop_id = $1 and resolved_by is null',
    [shopId],
  );
  return (rows[0] as { n: number }).n;
}

describe('what the server refuses', () => {
  test('is recorded without a network, and with one it lies in the tray with its reason and its words', async () => {
    await context.setOffline(true);
    await issueForLostJob(codes[0]);
    await issueForLostJob(codes[1]);
    await openShift();
    expect([await count('waiting'), await count('decide')]).toEqual(['2', '0']);
    await context.setOffline(false);
    await expect.poll(() => count('decide'), { timeout: 60_000 }).toBe('2');
    expect(await count('waiting')).toBe('0');
    const first = refused().first();
    await first.getByText('There is no such job in this shop.').waitFor();
    const words = (await first.locator('dl').textContent()) ?? '';
    expect(words).toContain(codes[0]?.slice(0, 4));
    expect(words).not.toMatch(/[{}]|[0-9a-f]{8}-[0-9a-f]{4}/);
    expect(await unsettled()).toBe(2);
  });

  test('is corrected with the keyboard alone, without a network, and is accepted when there is one', async () => {
    await context.setOffline(true);
    await refused().first().getByRole('button', { name: 'Correct' }).press('Enter');
    await page.getByRole('heading', { name: 'Correct and send again' }).waitFor();
    await page.keyboard.press('Escape');
    await refused().first().getByRole('button', { name: 'Correct' }).press('Enter');
    await page.getByRole('button', { name: 'Send again as it is' }).waitFor();
    await page.getByLabel('Job').selectOption({ label: 'No job' });
    await page.getByRole('button', { name: 'Send the correction' }).press('Enter');
    await page.getByText('Sent again. The old one is let go.').waitFor();
    expect([await count('waiting'), await count('decide')]).toEqual(['1', '1']);
    await context.setOffline(false);
    await expect.poll(() => count('waiting'), { timeout: 60_000 }).toBe('0');
    expect(await count('decide')).toBe('1');
    expect(await unsettled()).toBe(1);
    const { rows } = await database.query(
      `select o.envelope ->> 'supersedes' as corrected, q.op_id as refused from quarantine q
       join operations o on o.shop_id = q.shop_id and o.op_id = q.resolved_by where q.shop_id = $1`,
      [shopId],
    );
    expect(rows).toHaveLength(1);
    expect(rows[0].corrected).toBe(rows[0].refused);
  });

  test('is dropped only with a reason; the drop is taken back while it waits, and audited when it is sent', async () => {
    await context.setOffline(true);
    await refused().getByRole('button', { name: 'Drop' }).click();
    expect(await page.getByRole('button', { name: 'Choose the reason' }).isDisabled()).toBe(true);
    await page.getByRole('radio', { name: 'Recorded twice' }).click();
    await page.getByRole('button', { name: 'Drop it' }).click();
    await page.getByText('Dropped. It counts nowhere.').waitFor();
    expect([await count('waiting'), await count('decide')]).toEqual(['1', '0']);
    await page.getByRole('button', { name: 'Take back' }).click();
    await expect.poll(() => count('decide')).toBe('1');
    expect(await count('waiting')).toBe('0');
    await refused().getByRole('button', { name: 'Drop' }).click();
    await page.getByRole('radio', { name: 'Other', exact: true }).click();
    await page.getByLabel('What happened?').fill('Wrong tub in hand');
    await page.getByRole('button', { name: 'Drop it' }).click();
    await page.getByText('Dropped. It counts nowhere.').waitFor();
    await context.setOffline(false);
    await expect.poll(() => count('waiting'), { timeout: 60_000 }).toBe('0');
    expect(await unsettled()).toBe(0);
    const audit = await database.query(
      `select detail ->> 'reason' as reason from audit where shop_id = $1 and kind = 'entry-dropped'`,
      [shopId],
    );
    expect(audit.rows).toEqual([{ reason: 'Wrong tub in hand' }]);
  });
});

describe('queue and tray as a file', () => {
  let text = '';

  test('hold what needs a decision and what waits', async () => {
    await issueForLostJob(codes[2]);
    await openShift();
    await expect.poll(() => count('decide'), { timeout: 60_000 }).toBe('1');
    await context.setOffline(true);
    await issueForLostJob(codes[3]);
    await openShift();
    const saving = page.waitForEvent('download');
    await page.getByRole('button', { name: 'Save 2 logs' }).click();
    const saved = await saving;
    expect(saved.suggestedFilename()).toMatch(/^halfpail-entries-.*\.json$/);
    text = fs.readFileSync(await saved.path(), 'utf8');
    const file = JSON.parse(text) as { format: string; version: number; entries: { status: string }[] };
    expect([file.format, file.version]).toEqual(['halfpail-entries', 1]);
    expect(file.entries.map(({ status }) => status)).toEqual(['rejected', 'waiting']);
  });

  test.each([
    ['which is no JSON', () => 'half a fi', 'not a file of saved logs'],
    ['of a newer version', () => text.replace('"version": 1', '"version": 2'), 'newer version'],
    ['of another shop', () => text.replace(shopId, '0198a3c2-0000-7000-8000-000000000000'), 'another shop'],
  ])('%s are not read, and the screen says why', async (_, bend, sentence) => {
    await choose(bend());
    await page.getByRole('alert').filter({ hasText: sentence }).waitFor();
    expect([await count('waiting'), await count('decide')]).toEqual(['1', '1']);
  });

  test('come back on a device that lost them, and are told from what it has already', async () => {
    await page.evaluate(async () => {
      const names = (await indexedDB.databases()).map(({ name }) => name ?? '');
      const outbox = names.find((name) => name.startsWith('halfpail-outbox-')) ?? '';
      await new Promise<void>((resolve, reject) => {
        const open = indexedDB.open(outbox);
        open.addEventListener('error', () => reject(new Error('The outbox did not open.')));
        open.addEventListener('success', () => {
          const wipe = open.result.transaction('ops', 'readwrite');
          wipe.objectStore('ops').clear();
          wipe.addEventListener('complete', () => {
            open.result.close();
            resolve();
          });
        });
      });
    });
    await openShift();
    expect([await count('waiting'), await count('decide')]).toEqual(['0', '0']);
    await choose(text);
    await page.getByText('Read: 1 log to send, 1 log to decide.').waitFor();
    expect([await count('waiting'), await count('decide')]).toEqual(['1', '1']);
    await choose(text);
    await page.getByText('This device has them all already.').waitFor();
    await context.setOffline(false);
    await expect.poll(() => count('decide'), { timeout: 60_000 }).toBe('2');
    expect(await unsettled()).toBe(2);
  });

  async function choose(content: string): Promise<void> {
    const buffer = Buffer.from(content);
    await page.getByLabel('File of logs').setInputFiles({ name: 'logs.json', mimeType: 'application/json', buffer });
  }
});

test.each([
  [390, 844],
  [1024, 768],
  [1440, 900],
])('every key of the tray is at least 56 px high at %i × %i, and no page scrolls sideways', async (width, height) => {
  await page.setViewportSize({ width, height });
  const opId = await firstRefused();
  const screens = [
    ['/shift', 'Shift'],
    [`/shift?correct=${opId}`, 'Correct and send again'],
    [`/shift?drop=${opId}`, 'Drop this log'],
  ] as const;
  for (const [path, heading] of screens) {
    await page.goto(baseUrl + path);
    await page.getByRole('heading', { name: heading, exact: true }).waitFor();
    await page.getByText('There is no such job in this shop.').or(page.getByText('Recorded twice')).first().waitFor();
    const { low, wide } = await page.evaluate(() => ({
      low: [...document.querySelectorAll('main button, main select, main input, main summary, main textarea')]
        .filter((key) => key.getClientRects().length > 0 && key.getBoundingClientRect().height < 56)
        .map((key) => key.textContent),
      wide: document.documentElement.scrollWidth > document.documentElement.clientWidth,
    }));
    expect({ path, low, wide }).toEqual({ path, low: [], wide: false });
  }
});

async function firstRefused(): Promise<string> {
  const { rows } = await database.query(
    'select op_id from quarantine where shop_id = $1 and resolved_by is null order by received_at limit 1',
    [shopId],
  );
  return (rows[0] as { op_id: string }).op_id;
}
