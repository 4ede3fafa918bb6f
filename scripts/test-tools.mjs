import fs from 'node:fs';
import path from 'node:path';
import { installDebianPackages } from './apt.mjs';

const packageOf = { chromium: 'chromium', zbarimg: 'zbar-tools', pdftoppm: 'poppler-utils' };

/** The browser of the e2e tests, and what reads a printed label back. CHROMIUM names another browser. */
export function ensureTestTools() {
  const missing = Object.entries(packageOf).filter(([program]) => !isPresent(program));
  if (missing.length > 0)
    installDebianPackages(
      missing.map(([, name]) => name),
      'the browser tests',
    );
}

/** @param {string} program */
function isPresent(program) {
  const chosen = program === 'chromium' ? process.env['CHROMIUM'] : undefined;
  if (chosen !== undefined) return fs.existsSync(chosen);
  return (process.env['PATH'] ?? '').split(':').some((folder) => fs.existsSync(path.join(folder, program)));
}
