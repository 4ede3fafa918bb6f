import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import { StartError, say } from './say.mjs';

/**
 * Installs Debian packages, or says in one sentence why it cannot.
 * @param {string[]} names
 * @param {string} purpose ends the sentence "… is needed for"
 * @param {{ services?: string[] }} [options] what the packages would start as services, which is neither wanted now
 * nor at the next boot
 */
export function installDebianPackages(names, purpose, { services = [] } = {}) {
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
  const allowAgain = keepFromStarting(services);
  try {
    install(names, list, purpose, byHand);
  } finally {
    allowAgain();
  }
}

/** @param {string[]} names @param {string} list @param {string} purpose @param {string} byHand */
function install(names, list, purpose, byHand) {
  const words = ['install', '-y', '-qq', '--no-install-recommends', ...names];
  // Lists may be missing or old: look them up again only when the first try fails.
  if (runApt(words).status === 0) return;
  const update = runApt(['update', '-qq']);
  const retry = update.status === 0 ? runApt(words) : update;
  if (retry.status !== 0) {
    throw new StartError(
      `${list} is needed for ${purpose} and could not be installed (${lastLine(retry.stderr)}): ${byHand}.`,
    );
  }
}

/**
 * Masks the units, and has Debian's own hook (policy-rc.d) refuse every start while packages are installed.
 * @param {string[]} services
 * @returns {() => void} takes the hook away again, when it was not there before
 */
function keepFromStarting(services) {
  if (services.length === 0) return () => {};
  const units = '/etc/systemd/system';
  fs.mkdirSync(units, { recursive: true });
  for (const name of services) {
    const unit = `${units}/${name}.service`;
    if (fs.lstatSync(unit, { throwIfNoEntry: false }) === undefined) fs.symlinkSync('/dev/null', unit);
  }
  const hook = '/usr/sbin/policy-rc.d';
  if (fs.existsSync(hook)) return () => {};
  // 101: the action is forbidden (invoke-rc.d's manual).
  fs.writeFileSync(hook, '#!/bin/sh\nexit 101\n', { mode: 0o755 });
  return () => fs.rmSync(hook, { force: true });
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
