import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { packageFile } from './paths.mjs';
import { runNode } from './run-step.mjs';

/** @typedef {import('./test-parts.mjs').Count} Count */
/** @typedef {{ status: string, assertionResults: { status: string }[] }} FileResult */

/** @param {string} project @returns {Promise<Count>} counted from the report, never from the exit code alone */
export async function runVitest(project) {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'halfpail-tests-'));
  const report = path.join(folder, 'report.json');
  const words = ['run', '--config', 'tests/vitest.config.ts', '--project', project];
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`];
  try {
    const { code } = await runNode([packageFile('vitest/vitest.mjs'), ...words, ...reporters], {});
    const files = fs.existsSync(report) ? JSON.parse(fs.readFileSync(report, 'utf8')).testResults : [];
    return countResults(files, code);
  } finally {
    fs.rmSync(folder, { recursive: true, force: true });
  }
}

/**
 * A file that could not be loaded, a run that ended badly without a failed test, and a run of nothing are failures too.
 * @param {FileResult[]} files
 * @param {number} code exit code of the run
 * @returns {Count}
 */
export function countResults(files, code) {
  const tests = files.flatMap(({ assertionResults }) => assertionResults);
  const passed = tests.filter(({ status }) => status === 'passed').length;
  const failedTests = tests.filter(({ status }) => status === 'failed').length;
  const broken = files.filter(
    (file) => file.status === 'failed' && !file.assertionResults.some(({ status }) => status === 'failed'),
  ).length;
  const failed = failedTests + broken;
  return { passed, failed: failed === 0 && (code !== 0 || passed === 0) ? 1 : failed };
}
