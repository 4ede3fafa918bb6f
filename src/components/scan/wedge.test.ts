import { describe, expect, it } from 'vitest';
import { NO_RUN, readWedge } from './wedge.ts';

function press(keys: readonly string[], gapMs: number): string | undefined {
  let run = NO_RUN;
  let scanned: string | undefined;
  keys.forEach((key, n) => ({ run, scanned } = { scanned: undefined, ...readWedge(run, key, n * gapMs) }));
  return scanned;
}

describe('a wedge scanner on the page', () => {
  it('is heard when 8 characters and Enter come 30 ms apart', () => {
    expect(press([...'MN7WYDF4', 'Enter'], 30)).toBe('MN7WYDF4');
  });
  it('is not mistaken for a person who types 31 ms apart', () => {
    expect(press([...'MN7WYDF4', 'Enter'], 31)).toBeUndefined();
  });
  it('needs 8 characters', () => {
    expect(press([...'MN7WYDF', 'Enter'], 5)).toBeUndefined();
  });
  it('reads a whole address with its capitals', () => {
    const keys = [...'HTTPS://SHOP.EXAMPLE/B/MN7WYDF4'].flatMap((key) => ['Shift', key]);
    expect(press([...keys, 'Enter'], 5)).toBe('HTTPS://SHOP.EXAMPLE/B/MN7WYDF4');
  });
  it('forgets what a hand typed before the scan', () => {
    let run = readWedge(NO_RUN, 'x', 0).run;
    [...'MN7WYDF4'].forEach((key, n) => (run = readWedge(run, key, 1000 + n * 5).run));
    expect(readWedge(run, 'Enter', 1045).scanned).toBe('MN7WYDF4');
  });
  it('gives each scan once', () => {
    expect(press([...'MN7WYDF4', 'Enter', 'Enter'], 5)).toBeUndefined();
  });
});
