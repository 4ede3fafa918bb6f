import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import { StartError, say } from './say.mjs';

/**
 * Installs Debian packages, or says in one sentence why it cannot.
 * @param {string[]} names
 * @param {string} purpose ends the sentence "… is needed for"
 */
export function installDebianPackages(names, purpose) {
  const list = names.join(' ');
  const byHand = `run "sudo apt-get install ${list}" and start again`;
  if (!fs.existsSync('/usr/bin/apt-get')) {
    throw new StartError(
      `${list} is needed for ${purpose} and this system has no apt-get: install it and start again.`,
    );
  }
  if (process.getuid?.() !== 0) {
    throw new StartError(`${list} is needed for ${purpose} and this user has no right to install it: ${byHand}.`);
  }
  say(`Installing ${list} …`);
  const install = ['install', '-y', '-qq', '--no-install-recommends', ...names];
  // Lists may be missing or old: look them up again only when the first try fails.
  if (runApt(install).status === 0) return;
  const update = runApt(['update', '-qq']);
  const retry = update.status === 0 ? runApt(install) : update;
  if (retry.status !== 0) {
    throw new StartError(
      `${list} is needed for ${purpose} and could not be installed (${lastLine(retry.stderr)}): ${byHand}.`,
    );
  }
}

/** @param {string[]} words */
function runApt(words) {
  return spawnSync('apt-get', ['-o', 'DPkg::Lock::Timeout=300', ...words], {
    encoding: 'utf8',
    env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    stdio: ['ignore', 'ignore', 'pipe'],
  });
}

/** @param {string} text */
function lastLine(text) {
  return text.trim().split('\n').at(-1) ?? '';
}
