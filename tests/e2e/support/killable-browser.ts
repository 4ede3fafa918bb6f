import { type ChildProcess, spawn } from 'node:child_process';
import { type BrowserContext, type Page, chromium } from 'playwright-core';
import { BROWSER_FLAGS, chromiumProgram } from './browser.ts';

/** A Chromium with a profile on the disk, in a process group that the test owns. */
export interface KillableBrowser {
  context: BrowserContext;
  /** SIGKILL to all of its processes. */
  kill: () => Promise<void>;
  /** As a person closes it: what it still holds is written to the profile. */
  close: () => Promise<void>;
}

export async function launchKillable(profile: string): Promise<KillableBrowser> {
  const words = ['--headless=new', '--remote-debugging-port=0', `--user-data-dir=${profile}`, ...BROWSER_FLAGS];
  const child = spawn(chromiumProgram(), words, { detached: true, stdio: ['ignore', 'ignore', 'pipe'] });
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  const browser = await chromium.connectOverCDP(await debuggerOf(child));
  const [context] = browser.contexts();
  if (context === undefined) throw new Error('The browser has no window.');
  return {
    context,
    kill: async () => {
      process.kill(-(child.pid as number), 'SIGKILL');
      await ended;
    },
    close: async () => {
      const session = await browser.newBrowserCDPSession();
      await session.send('Browser.close').catch(() => {});
      await ended;
    },
  };
}

function debuggerOf(child: ChildProcess): Promise<string> {
  return new Promise((resolve, reject) => {
    let printed = '';
    child.stderr?.on('data', (chunk: Buffer) => {
      printed += chunk.toString();
      const address = /DevTools listening on (ws:\S+)/.exec(printed)?.[1];
      if (address !== undefined) resolve(address);
    });
    child.once('exit', () => reject(new Error(`The browser ended by itself: ${printed}`)));
  });
}

/** The tab's own process dies, as when memory runs out; the browser lives on. */
export async function crashTab(page: Page): Promise<void> {
  const session = await page.context().newCDPSession(page);
  const crashed = page.waitForEvent('crash');
  session.send('Page.crash').catch(() => {});
  await crashed;
  await page.close();
}
