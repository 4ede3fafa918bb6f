import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { packageFile, projectFolder } from '#scripts/paths.mjs';

interface Diagnostic {
  filename: string;
  code: string;
  message: string;
  help?: string;
}

/**
 * Lints files, given as path and text, under the project's own configuration, in a throw-away copy of its folders: a
 * probe written into the checkout would be met by whoever builds or lints there at that moment.
 * @returns what was said about each path: rule and message
 */
export function lintProbes(probes: ReadonlyMap<string, string>): Map<string, string[]> {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'halfpail-lint-'));
  try {
    for (const name of ['.oxlintrc.json', 'package.json'])
      fs.copyFileSync(path.join(projectFolder, name), path.join(folder, name));
    for (const [file, text] of probes) {
      fs.mkdirSync(path.dirname(path.join(folder, file)), { recursive: true });
      fs.writeFileSync(path.join(folder, file), text);
    }
    const words = [packageFile('oxlint/bin/oxlint'), '--format=json'];
    const { stdout } = spawnSync(process.execPath, words, { cwd: folder, encoding: 'utf8' });
    const { diagnostics } = JSON.parse(stdout) as { diagnostics: Diagnostic[] };
    const said = new Map<string, string[]>([...probes.keys()].map((file) => [file, []]));
    for (const { filename, code, message, help } of diagnostics)
      said.get(filename)?.push(`${code}: ${message} ${help ?? ''}`);
    return said;
  } finally {
    fs.rmSync(folder, { recursive: true, force: true });
  }
}
