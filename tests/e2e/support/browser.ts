import { type Browser, chromium } from 'playwright-core';

/** What a browser needs to run here, quietly. */
export const BROWSER_FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

export const chromiumProgram = () => process.env['CHROMIUM'] ?? '/usr/bin/chromium';

/** Debian's Chromium; with `video` a y4m file plays as the camera. */
export function launchBrowser(video?: string): Promise<Browser> {
  const camera =
    video === undefined
      ? []
      : [
          '--use-fake-device-for-media-stream',
          '--use-fake-ui-for-media-stream',
          `--use-file-for-fake-video-capture=${video}`,
        ];
  return chromium.launch({
    executablePath: chromiumProgram(),
    args: [...BROWSER_FLAGS, ...camera],
  });
}
