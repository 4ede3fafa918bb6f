import { spawn } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';
import { makeGrantKeys } from '#scripts/grant-keys.mjs';
import { projectFolder } from '#scripts/paths.mjs';
import { findFreePort } from '#scripts/port.mjs';

export interface OwnServer {
  baseUrl: string;
  /** All that it has written to its terminal. */
  printed: () => string;
  kill: (signal: 'SIGTERM' | 'SIGKILL') => void;
  /** Its exit code; null when it was killed. */
  ended: Promise<number | null>;
}

/** A built server that a test may watch, stop and kill, on a database that exists; settings win over what it is given here. */
export async function startOwnServer(databaseUrl: string, settings: NodeJS.ProcessEnv = {}): Promise<OwnServer> {
  const port = settings['PORT'] ?? String(await findFreePort());
  const env = {
    ...process.env,
    DATABASE_URL: databaseUrl,
    GRANT_KEYS: makeGrantKeys(),
    HOST: '127.0.0.1',
    PORT: port,
    NODE_ENV: 'production',
    ...settings,
  };
  const words = ['--import', 'tsx', 'scripts/serve.ts'];
  const server = spawn(process.execPath, words, { cwd: projectFolder, env, stdio: ['ignore', 'pipe', 'pipe'] });
  const ended = new Promise<number | null>((resolve) => server.once('exit', resolve));
  let printed = '';
  for (const stream of [server.stdout, server.stderr])
    stream.on('data', (chunk: Buffer) => (printed += chunk.toString()));
  while (!printed.includes('ready') && server.exitCode === null) await sleep(50);
  return {
    baseUrl: `http://127.0.0.1:${port}`,
    printed: () => printed,
    kill: (signal) => void server.kill(signal),
    ended,
  };
}
