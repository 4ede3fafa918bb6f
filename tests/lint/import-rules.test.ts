import path from 'node:path';
import { describe, expect, test } from 'vitest';
import { importTable } from './import-table.ts';
import { lintProbes } from './lint-probes.ts';

const ways = {
  imported: (from: string) => `import * as probe from '${from}';\nconsole.log(probe);`,
  exported: (from: string) => `export { probe } from '${from}';`,
  'as-a-type': (from: string) => `import type { Probe } from '${from}';\nexport const probe: Probe | null = null;`,
  'on-demand': (from: string) => `export const probe = await import('${from}');`,
};

const restricted = 'eslint(no-restricted-imports)';
const middleware = 'src/middleware.ts';

/** Each import in a file of its own beside the row's, so that one refusal cannot stand for another. */
function writeProbes(file: string, imports: readonly string[]): Map<string, string> {
  const probes = new Map<string, string>();
  for (const [way, write] of Object.entries(ways)) {
    for (const [n, from] of imports.entries()) {
      const text = write(from);
      const name = file === middleware ? file : path.join(path.dirname(file), way, `${n}-${path.basename(file)}`);
      probes.set(name, file.endsWith('.astro') ? `---\n${text}\n---\n<p></p>\n` : text);
    }
  }
  return probes;
}

/** The middleware is one file, so its imports are linted one after the other. */
function lintImports(file: string, imports: readonly string[]): string[] {
  const groups = file === middleware ? imports.map((from) => [from]) : [imports];
  return groups.flatMap((group) => {
    const probes = writeProbes(file, group);
    return [...lintProbes(probes)].map(([name, lines]) => `${probes.get(name)} → ${lines.join()}`);
  });
}

describe.each(importTable)('$file: $message', ({ file, message, allowed, forbidden }) => {
  test('refuses every forbidden import, however it is written', () => {
    const said = lintImports(file, forbidden);
    expect(said).toHaveLength(forbidden.length * (file === middleware ? 1 : Object.keys(ways).length));
    const refused = (line: string) => line.includes(restricted) && line.includes(message);
    expect(said.filter((line) => !refused(line))).toEqual([]);
  });

  test('lets every allowed import pass', () => {
    expect(lintImports(file, allowed).filter((line) => line.includes(restricted))).toEqual([]);
  });
});

test('refuses a cycle between two files, across folders and # names', () => {
  const said = lintProbes(
    new Map([
      ['src/contract/first.ts', "import { second } from '#contract/second.ts';\nexport const first = () => second;"],
      ['src/contract/second.ts', "import { first } from '#contract/first.ts';\nexport const second = () => first;"],
    ]),
  );
  for (const lines of said.values()) expect(lines.join()).toContain('import(no-cycle)');
});

test.each([
  'Date.now()',
  'new Date()',
  'Math.random()',
  'fetch("/x")',
  'crypto.randomUUID()',
  'performance.now()',
  'process.env',
])('keeps %s out of the domain', (call) => {
  const said = lintProbes(new Map([['src/domain/probe.ts', `export const probe = () => ${call};\n`]]));
  expect(said.get('src/domain/probe.ts')?.join()).toContain('domain has no clock, no random and no I/O.');
});

test('refuses a file of more than 250 lines', () => {
  const lines = (count: number) => Array.from({ length: count }, (_, n) => `export const line${n} = ${n};`).join('\n');
  const said = lintProbes(
    new Map([
      ['src/domain/long.ts', lines(251)],
      ['src/domain/short.ts', lines(250)],
    ]),
  );
  expect(said.get('src/domain/long.ts')?.join()).toContain('eslint(max-lines)');
  expect(said.get('src/domain/short.ts')).toEqual([]);
});
