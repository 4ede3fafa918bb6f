import fs from 'node:fs';
import path from 'node:path';
import pg from 'pg';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { distFolder } from '#scripts/paths.mjs';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { launchBrowser } from './support/browser.ts';
import { signInOn } from './support/station-page.ts';

const baseUrl = inject('baseUrl');
let browser: Browser;
let database: pg.Client;

beforeAll(async () => {
  browser = await launchBrowser();
  database = new pg.Client({ connectionString: inject('superuserUrl') });
  await database.connect();
});
afterAll(async () => {
  await browser.close();
  await database.end();
});

test('a browser that was cleared is told so at the next sign-in, until somebody has read it; the manager finds it', async () => {
  const station = await browser.newContext();
  const page = await signInOn(station, baseUrl, 'mixer');
  const cleaner = await station.newCDPSession(page);
  await page.goto('about:blank');
  await cleaner.send('Storage.clearDataForOrigin', { origin: baseUrl, storageTypes: 'indexeddb,local_storage' });
  await page.goto(`${baseUrl}/sign-in`);
  const account = demoSignIns.find(({ role }) => role === 'mixer');
  await page.getByLabel('E-mail').fill(account?.email ?? '');
  await page.getByLabel('Password').fill(account?.password ?? '');
  await page.getByRole('button', { name: 'Sign in' }).click();
  const note = page.getByText('This browser cleared what it kept on this device.');
  await note.waitFor();
  await page.goto(`${baseUrl}/shift`);
  await note.waitFor();
  await page.getByRole('button', { name: 'I have read it' }).click();
  await note.waitFor({ state: 'detached' });
  const { rows } = await database.query(`select detail from audit where kind = 'outbox-lost'`);
  expect(rows).toHaveLength(1);
  await station.close();
});

test('Shift says whether this browser keeps what waits', async () => {
  const station = await browser.newContext();
  const page = await signInOn(station, baseUrl, 'mixer');
  await page.goto(`${baseUrl}/shift`);
  await page.getByText(/This device (may clear what it keeps|keeps what waits)/).waitFor();
  await station.close();
});

/** Names of hashed files that this text mentions. */
const mentioned = (text: string, known: ReadonlySet<string>) =>
  (text.match(/[\w.-]+\.(?:js|css|woff2)/g) ?? []).filter((name) => known.has(name));

test('what is precached is what a station page reaches: a chunk of the office is not among it', () => {
  const client = path.join(distFolder, 'client');
  const worker = fs.readFileSync(path.join(client, 'sw.js'), 'utf8');
  const precached = new Set([...worker.matchAll(/_astro\/([\w.-]+\.(?:js|css|woff2))/g)].map(([, name]) => name ?? ''));
  const pages = fs
    .readdirSync(client, { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.html') && !name.startsWith('office'));
  const reached = new Set<string>();
  const open = pages.flatMap((page) => mentioned(fs.readFileSync(path.join(client, page), 'utf8'), precached));
  for (let name = open.pop(); name !== undefined; name = open.pop()) {
    if (reached.has(name)) continue;
    reached.add(name);
    if (!name.endsWith('.woff2'))
      open.push(...mentioned(fs.readFileSync(path.join(client, '_astro', name), 'utf8'), precached));
  }
  expect(reached.size).toBeGreaterThan(20);
  expect([...precached].filter((name) => !reached.has(name))).toEqual([]);
});
