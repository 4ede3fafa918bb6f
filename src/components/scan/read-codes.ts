import type { CodeDetector } from './code-detector.ts';

const PAUSE_MS = 120;
/** The same code is not told again while it stays in the picture. */
const SAME_MS = 2_500;

/** Looks at the picture several times a second and tells each code once; returns how to stop. */
export function readCodes(video: HTMLVideoElement, detect: CodeDetector, onText: (text: string) => void): () => void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  let stopped = false;
  let told = { text: '', at: Number.NEGATIVE_INFINITY };
  const look = async () => {
    const texts = video.readyState >= HTMLMediaElement.HAVE_CURRENT_DATA ? await detect(video).catch(() => []) : [];
    if (stopped) return;
    const now = performance.now();
    for (const text of texts) {
      if (text === told.text && now - told.at < SAME_MS) continue;
      told = { text, at: now };
      onText(text);
    }
    timer = setTimeout(() => void look(), PAUSE_MS);
  };
  void look();
  return () => {
    stopped = true;
    clearTimeout(timer);
  };
}
