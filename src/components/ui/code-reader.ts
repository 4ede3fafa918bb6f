import wasmUrl from 'zxing-wasm/reader/zxing_reader.wasm?url';

const CACHE = 'halfpail-code-reader';
const IDLE_MS = 8_000;

/** The browser cannot fetch the reader now; scanning waits for a network, typing does not. */
export class CodeReaderError extends Error {
  override name = 'CodeReaderError';
}

/** The QR reader for browsers that have none of their own; kept, so that it is there without a network. @throws CodeReaderError */
export async function takeCodeReader(): Promise<ArrayBuffer> {
  const cache = await caches.open(CACHE);
  const kept = await cache.match(wasmUrl);
  if (kept !== undefined) return kept.arrayBuffer();
  const answer = await fetch(wasmUrl).catch(() => undefined);
  if (answer === undefined || !answer.ok) throw new CodeReaderError('The code reader is not on this device yet.');
  for (const old of await cache.keys()) await cache.delete(old);
  // A full disk must not keep this scan from working.
  await cache.put(wasmUrl, answer.clone()).catch(() => undefined);
  return answer.arrayBuffer();
}

/** Fetches the reader once the page has been quiet for a while; returns how to call it off. */
export function keepCodeReader(): () => void {
  if ('BarcodeDetector' in globalThis || !('caches' in globalThis)) return () => undefined;
  const timer = setTimeout(() => void takeCodeReader().catch(() => undefined), IDLE_MS);
  return () => clearTimeout(timer);
}
