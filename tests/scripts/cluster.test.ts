import fs from 'node:fs';
import path from 'node:path';
import { afterAll, expect, test } from 'vitest';
import { clusterHome } from '#scripts/cluster-folder.mjs';
import { enterCluster, type OpenCluster } from '#scripts/cluster.mjs';
import { superuserUrl, withClient } from '#scripts/databases.mjs';

const name = `probe-pg-${process.pid}`;
const pidFile = path.join(clusterHome(), name, 'data/postmaster.pid');

afterAll(() => {
  const left = fs.readdirSync(clusterHome()).filter((entry) => entry.startsWith(name));
  for (const entry of left) fs.rmSync(path.join(clusterHome(), entry), { recursive: true, force: true });
});

const answers = (cluster: OpenCluster) =>
  withClient(superuserUrl(cluster), async (client) => (await client.query('select 1 as one')).rows);

test('two who enter share one server, and only the last to leave stops it', async () => {
  const first = await enterCluster(name);
  const second = await enterCluster(name);
  expect(second.port).toBe(first.port);
  await first.leave();
  expect(await answers(second)).toEqual([{ one: 1 }]);
  await second.leave();
  expect(fs.existsSync(pidFile)).toBe(false);
  await expect(answers(second)).rejects.toThrow('does not answer');
});

test('what was written is there at the next start', async () => {
  const before = await enterCluster(name);
  await withClient(superuserUrl(before), (client) => client.query('create table kept as select 850 as grams'));
  await before.leave();
  const after = await enterCluster(name);
  const kept = await withClient(
    superuserUrl(after),
    async (client) => (await client.query('select grams from kept')).rows,
  );
  await after.leave();
  expect(kept).toEqual([{ grams: 850 }]);
});

test('starts again after a crash whose process id now belongs to another program', async () => {
  const crashed = await enterCluster(name);
  const [pid, ...rest] = fs.readFileSync(pidFile, 'utf8').split('\n');
  process.kill(Number(pid), 'SIGKILL');
  await expect.poll(() => answers(crashed).catch(() => 'gone'), { timeout: 10_000 }).toBe('gone');
  fs.writeFileSync(pidFile, [process.pid, ...rest].join('\n'));
  const again = await enterCluster(name);
  expect(await answers(again)).toEqual([{ one: 1 }]);
  await again.leave();
  await crashed.leave();
});

test('the passwords are readable by their owner alone', () => {
  expect(fs.statSync(path.join(clusterHome(), `${name}.passwords.json`)).mode & 0o777).toBe(0o600);
});
