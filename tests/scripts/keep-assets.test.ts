import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { keepAssets } from '#scripts/keep-assets.mjs';

let folder: string;
beforeEach(() => void (folder = fs.mkdtempSync(path.join(os.tmpdir(), 'assets-'))));
afterEach(() => fs.rmSync(folder, { recursive: true, force: true }));

/** A build empties its folder and writes these files. */
function build(...names: string[]): string[] {
  const assets = path.join(folder, '_astro');
  fs.rmSync(assets, { recursive: true, force: true });
  fs.mkdirSync(assets);
  for (const name of names) fs.writeFileSync(path.join(assets, name), name);
  keepAssets(assets, path.join(folder, 'store'));
  return fs.readdirSync(assets).sort();
}

test('the files of the last three builds are served, those of the fourth are not', () => {
  expect(build('page.a.js', 'style.1.css')).toEqual(['page.a.js', 'style.1.css']);
  expect(build('page.b.js', 'style.1.css')).toEqual(['page.a.js', 'page.b.js', 'style.1.css']);
  expect(build('page.c.js', 'style.1.css')).toEqual(['page.a.js', 'page.b.js', 'page.c.js', 'style.1.css']);
  expect(build('page.d.js', 'style.1.css')).toEqual(['page.b.js', 'page.c.js', 'page.d.js', 'style.1.css']);
  expect(fs.readdirSync(path.join(folder, 'store', 'assets')).sort()).toEqual([
    'page.b.js',
    'page.c.js',
    'page.d.js',
    'style.1.css',
  ]);
});

test('a build that failed loses nothing of those before it', () => {
  build('page.a.js');
  fs.rmSync(path.join(folder, '_astro'), { recursive: true });
  expect(build('page.b.js')).toEqual(['page.a.js', 'page.b.js']);
  expect(fs.readFileSync(path.join(folder, '_astro', 'page.a.js'), 'utf8')).toBe('page.a.js');
});
