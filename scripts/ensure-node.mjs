import { StartError } from './say.mjs';

/**
 * The same range as "engines" in package.json.
 * @param {string} version e.g. '20.20.2'
 */
export function requireNode(version = process.versions.node) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  const fits = (major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22;
  if (!fits)
    throw new StartError(
      `Node.js ${version} is too old or not supported: use 20.19 or later of 20, or 22.12 or later.`,
    );
}
