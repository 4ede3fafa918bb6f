import { generateKeyPairSync, randomUUID } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import { dataFolder } from './paths.mjs';

const file = path.join(dataFolder, 'grant-keys.json');

/** The keys that sign offline grants, as JSON: `{ keys: [private JWK, …] }`, the first is current. Made once. */
export function requireGrantKeys() {
  if (!fs.existsSync(file)) {
    fs.mkdirSync(dataFolder, { recursive: true });
    fs.writeFileSync(file, makeGrantKeys(), { mode: 0o600 });
  }
  return fs.readFileSync(file, 'utf8');
}

/** @returns {string} */
export function makeGrantKeys() {
  const { privateKey } = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  return JSON.stringify({
    keys: [{ ...privateKey.export({ format: 'jwk' }), kid: randomUUID(), alg: 'ES256', use: 'sig' }],
  });
}
