import { spawn } from 'node:child_process';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { projectFolder } from '#scripts/paths.mjs';
import { findFreePort } from '#scripts/port.mjs';
import { openTestCluster, type TestCluster } from '#tests/support/postgres.ts';

let cluster: TestCluster;
beforeAll(async () => {
  cluster = await openTestCluster();
});
afterAll(() => cluster.close());

/** Runs the start command until `ready` is printed. */
async function startUntilReady(env: Record<string, string>) {
  const child = spawn(process.execPath, ['scripts/start.mjs'], { cwd: projectFolder, env: { ...process.env, ...env } });
  const ended = new Promise<number | null>((resolve) => child.once('exit', resolve));
  let printed = '';
  child.stdout.on('data', (bytes: Buffer) => (printed += bytes.toString()));
  child.stderr.on('data', (bytes: Buffer) => (printed += bytes.toString()));
  await expect.poll(() => printed, { timeout: 120_000 }).toMatch(/^ready http/m);
  return { child, ended, printed: () => printed };
}

test('the start command fills the demo shop once, prints its sign-ins, and stops when asked', async () => {
  const { ownerUrl, appUrl } = await cluster.makeDatabase();
  const port = await findFreePort();
  const env = { DATABASE_URL: appUrl, MIGRATE_DATABASE_URL: ownerUrl, PORT: String(port) };

  const first = await startUntilReady(env);
  for (const { email, password } of demoSignIns) expect(first.printed()).toMatch(new RegExp(`${email} +${password}`));
  expect((await fetch(`http://127.0.0.1:${port}/`)).status).toBe(200);
  first.child.kill('SIGTERM');
  expect(await first.ended).toBe(0);
  await expect(fetch(`http://127.0.0.1:${port}/`)).rejects.toThrow('fetch failed');

  const second = await startUntilReady(env);
  expect(first.printed()).toContain('Filling the demo shop');
  expect(second.printed()).not.toContain('Filling the demo shop');
  second.child.kill('SIGINT');
  expect(await second.ended).toBe(0);
});

test('the server ends with the start command, even when that is killed', async () => {
  const port = await findFreePort();
  const { ownerUrl: MIGRATE_DATABASE_URL, appUrl: DATABASE_URL } = await cluster.makeDatabase();
  const { child } = await startUntilReady({ DATABASE_URL, MIGRATE_DATABASE_URL, PORT: String(port), DEMO_SHOP: 'off' });
  child.kill('SIGKILL');
  const answer = () =>
    fetch(`http://127.0.0.1:${port}/`).then(
      ({ status }) => status,
      () => 'gone',
    );
  await expect.poll(answer, { timeout: 10_000 }).toBe('gone');
});
