import { spawn } from 'node:child_process';
import { projectFolder } from './paths.mjs';
import { StartError } from './say.mjs';
import { requireNotStopped, stopping } from './stopping.mjs';

/**
 * Runs Node on `words` to its end, and throws a StartError that names `what` when it fails.
 * @param {string} what
 * @param {string[]} words
 * @param {{ env?: NodeJS.ProcessEnv, quiet?: boolean }} [options] quiet keeps standard output unless the step fails
 */
export async function runStep(what, words, { env = {}, quiet = false } = {}) {
  const { code, output } = await runNode(words, { env, quiet });
  requireNotStopped();
  if (code === 0) return;
  process.stderr.write(output);
  throw new StartError(`${what} failed for the reason above.`);
}

/**
 * @param {string[]} words
 * @param {{ env?: NodeJS.ProcessEnv, quiet?: boolean }} options
 * @returns {Promise<{ code: number, output: string }>}
 */
export function runNode(words, { env = {}, quiet = false }) {
  requireNotStopped();
  return new Promise((resolve, reject) => {
    let output = '';
    const child = spawn(process.execPath, words, {
      cwd: projectFolder,
      env: { ...process.env, ...env },
      stdio: ['ignore', quiet ? 'pipe' : 'inherit', quiet ? 'pipe' : 'inherit'],
    });
    const keep = (/** @type {Buffer} */ bytes) => (output += bytes.toString());
    child.stdout?.on('data', keep);
    child.stderr?.on('data', keep);
    const end = () => child.kill('SIGTERM');
    stopping.addEventListener('abort', end, { once: true });
    child.once('error', reject);
    child.once('close', (code) => {
      stopping.removeEventListener('abort', end);
      resolve({ code: code ?? 1, output });
    });
  });
}
