import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { packageFile, projectFolder } from '#scripts/paths.mjs';

export interface Ended {
  code: number | null;
  /** Lines of standard error. */
  said: string[];
}

interface Circumstances {
  /** Only these variables, PATH, HOME and PORT are set. */
  env: Record<string, string>;
  /** Runs as user nobody, when the test itself may change users. */
  asNobody?: boolean;
  folder?: string;
}

/** Whoever has a shop open on the usual port does not disturb a test that is not about the port. */
const unlikelyPort = String(20_000 + (process.pid % 20_000));

/** Types `npm start`, without npm, and waits for its end. */
export function runStart({ env, asNobody = false, folder = projectFolder }: Circumstances): Ended {
  const words = ['scripts/start.mjs'];
  const drop = ['--reuid=nobody', '--regid=nogroup', '--clear-groups', process.execPath];
  const [program, ...before] = asNobody && isRoot ? ['setpriv', ...drop] : [process.execPath];
  const result = spawnSync(program ?? '', [...before, ...words], {
    cwd: folder,
    encoding: 'utf8',
    env: { PATH: process.env['PATH'], HOME: folder, PORT: unlikelyPort, ...env },
    timeout: 60_000,
  });
  if (result.error) throw result.error;
  return { code: result.status, said: result.stderr.split('\n').filter((line) => line !== '') };
}

const isRoot = process.getuid?.() === 0;

/** A small copy of the checkout that any user can read: the scripts and the packages they need before the database. */
export function copyCheckout(): { folder: string; remove: () => void } {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'halfpail-start-'));
  fs.chmodSync(folder, 0o755);
  fs.cpSync(path.join(projectFolder, 'scripts'), path.join(folder, 'scripts'), { recursive: true });
  const lock = JSON.parse(fs.readFileSync(path.join(projectFolder, 'package-lock.json'), 'utf8')) as {
    packages: Record<string, object>;
  };
  const needed = Object.keys(lock.packages).filter((name) =>
    /^node_modules\/(zod|pg(-[a-z0-9]+)*|pgpass|postgres-[a-z]+|split2|xtend)$/.test(name),
  );
  const packages = Object.fromEntries(needed.map((name) => [name, lock.packages[name] ?? {}]));
  for (const name of needed)
    fs.cpSync(packageFile(name.replace('node_modules/', '')), path.join(folder, name), { recursive: true });
  for (const name of ['package-lock.json', 'node_modules/.package-lock.json'])
    fs.writeFileSync(path.join(folder, name), JSON.stringify({ packages }));
  fs.copyFileSync(path.join(projectFolder, 'package.json'), path.join(folder, 'package.json'));
  return { folder, remove: () => fs.rmSync(folder, { recursive: true, force: true }) };
}
