import { build } from 'esbuild';
import { launchBrowser } from '#tests/e2e/support/browser.ts';

declare global {
  var measure: (seeds: number) => number[][];
}

/** ms of each seed of each row in headless Chromium, slowed down as a phone is. @param rate 4: a quarter of the speed */
export async function measureInBrowser(seeds: number, rate: number): Promise<number[][]> {
  const entry = new URL('browser-kernel.ts', import.meta.url).pathname;
  const { outputFiles } = await build({ entryPoints: [entry], bundle: true, minify: true, write: false });
  const browser = await launchBrowser();
  try {
    const page = await browser.newPage();
    const devtools = await page.context().newCDPSession(page);
    await devtools.send('Emulation.setCPUThrottlingRate', { rate });
    await page.addScriptTag({ content: outputFiles[0]?.text ?? '' });
    return await page.evaluate((count) => globalThis.measure(count), seeds);
  } finally {
    await browser.close();
  }
}
