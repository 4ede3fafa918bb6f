import fs from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import zlib from 'node:zlib';

const brotli = promisify(zlib.brotliCompress);
const gzip = promisify(zlib.gzip);

/**
 * Writes .br and .gz beside each text file; after the build, so that they stay out of the precache.
 * @param {string} folder
 */
export async function precompress(folder) {
  for (const name of fs.readdirSync(folder, { recursive: true, encoding: 'utf8' })) {
    if (!/\.(js|css|wasm|svg|json|html|webmanifest)$/.test(name)) continue;
    const file = path.join(folder, name);
    const bytes = fs.readFileSync(file);
    if (bytes.length < 1024) continue;
    const params = { [zlib.constants.BROTLI_PARAM_QUALITY]: 9, [zlib.constants.BROTLI_PARAM_SIZE_HINT]: bytes.length };
    fs.writeFileSync(`${file}.br`, await brotli(bytes, { params }));
    fs.writeFileSync(`${file}.gz`, await gzip(bytes, { level: 9 }));
  }
}
