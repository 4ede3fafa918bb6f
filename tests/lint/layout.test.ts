import { execFileSync } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { expect, test } from 'vitest';
import { projectFolder } from '#scripts/paths.mjs';

/** What a clone will hold: tracked files, and new ones that are not ignored. */
const files = execFileSync('git', ['ls-files', '--cached', '--others', '--exclude-standard'], {
  cwd: projectFolder,
  encoding: 'utf8',
})
  .split('\n')
  .filter((name) => name !== '' && fs.existsSync(path.join(projectFolder, name)));
const sources = files.filter((name) => /\.(ts|tsx|mjs|astro)$/.test(name));

const topLevel =
  'README.md DEVELOPERS.md package.json package-lock.json astro.config.mjs tsconfig.json migrations scripts public src tests'.split(
    ' ',
  );

test('the top level holds the agreed names and dotfiles, nothing else', () => {
  const names = [...new Set(files.map((name) => name.split('/')[0] ?? ''))];
  expect(names.filter((name) => !name.startsWith('.') && !topLevel.includes(name))).toEqual([]);
});

test('src holds the agreed folders', () => {
  const agreed = [
    'domain',
    'contract',
    'offline',
    'workers',
    'service-worker',
    'server',
    'components',
    'layouts',
    'styles',
    'assets',
    'pages',
  ];
  const names = [...new Set(files.filter((name) => name.startsWith('src/')).map((name) => name.split('/')[1] ?? ''))];
  expect(names.filter((name) => ![...agreed, 'middleware.ts', 'env.d.ts'].includes(name))).toEqual([]);
});

test('no file is a catch-all', () => {
  const catchAll = /^(utils?|helpers?|common|misc|shared|types|constants|lib)\.|(manager|helper|service|utils)\./i;
  expect(sources.map((name) => path.basename(name)).filter((name) => catchAll.test(name))).toEqual([]);
});

test('no file gathers the exports of others', () => {
  const index = sources.filter((name) => /(^|\/)index\.(ts|tsx|mjs)$/.test(name) && !name.startsWith('src/pages/'));
  const onlyExports = sources.filter((name) => /^(export (\*|\{[^}]*\}) from '[^']+';\s*)+$/.test(read(name)));
  expect([...index, ...onlyExports]).toEqual([]);
});

test('file names are kebab-case, components PascalCase', () => {
  const odd = sources.filter((name) => {
    const base = path.basename(name).replace(/(\.test|\.config|\.d)?\.(ts|tsx|mjs|astro)$/, '');
    const isPage = name.startsWith('src/pages/');
    return (
      !/^[a-z0-9]+(-[a-z0-9]+)*$/.test(base) &&
      !/^([A-Z][a-z0-9]*)+$/.test(base) &&
      !(isPage && /^\[[a-z.]+\]$/.test(base))
    );
  });
  expect(odd).toEqual([]);
});

test('no file has more than 250 lines that say something', () => {
  const long = sources.filter(
    (name) =>
      read(name)
        .split('\n')
        .filter((line) => line.trim() !== '').length > 250,
  );
  expect(long.filter((name) => name !== 'src/server/db/tables.ts')).toEqual([]);
});

test('no test is skipped or singled out, and nothing is left to do in a comment', () => {
  const marks = new RegExp(
    ['\\b(test|it|describe)\\.(sk' + 'ip|on' + 'ly|to' + 'do)\\b', '\\b(TO' + 'DO|FIX' + 'ME)\\b'].join('|'),
  );
  expect(sources.filter((name) => marks.test(read(name)))).toEqual([]);
});

function read(name: string): string {
  return fs.readFileSync(path.join(projectFolder, name), 'utf8');
}
