import { spawn } from 'node:child_process';
import { projectFolder } from './paths.mjs';
import { StartError } from './say.mjs';

/** @typedef {{ url: string, pid: number, ended: Promise<number>, stop: () => void }} RunningServer */

/**
 * Starts the built server as a process of its own and waits until it listens.
 * @param {NodeJS.ProcessEnv} env DATABASE_URL, PORT, HOST, GRANT_KEYS and the optional PUBLIC_ORIGIN, TRUST_PROXY
 * @returns {Promise<RunningServer>}
 */
export function spawnServer(env) {
  // A group of its own keeps a terminal's Ctrl-C away: the parent stops it first, then the database. It ends with its parent's channel.
  const child = spawn(process.execPath, ['--import', 'tsx', 'scripts/serve.ts'], {
    cwd: projectFolder,
    env: { ...process.env, NODE_ENV: 'production', ...env },
    detached: true,
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
  });
  const ended = new Promise((/** @type {(code: number) => void} */ resolve) =>
    child.once('exit', (code) => resolve(code ?? 1)),
  );
  const stop = () => void child.kill('SIGTERM');
  return new Promise((resolve, reject) => {
    child.once('error', reject);
    child.on('message', (/** @type {{ url?: string, problem?: string }} */ { url, problem }) => {
      // The TypeScript loader sends messages of its own on this channel.
      if (url) resolve({ url, pid: child.pid ?? 0, ended, stop });
      else if (problem) reject(new StartError(problem));
    });
    void ended.then((code) =>
      reject(new StartError(`The server ended before it was ready (${code}) for the reason above.`)),
    );
  });
}
