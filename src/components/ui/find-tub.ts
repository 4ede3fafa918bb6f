import type { Row } from '#contract/rows.ts';
import { nearestBucketCodes, parseBucketCode } from '#domain/bucket-code.ts';

type Tub = Row<'buckets'>;
export type FoundTub = { tub: Tub } | { problem: string; near: Tub | undefined };

/** The tub that a typed code or a scanned address names; else the rule it breaks and a known tub one letter away. */
export function findTub(text: string, shelf: readonly Tub[]): FoundTub {
  const read = parseBucketCode(text);
  if ('code' in read) {
    const tub = shelf.find((entry) => entry.code === read.code);
    return tub === undefined
      ? { problem: 'No such tub on this device. Send, then look again.', near: undefined }
      : { tub };
  }
  const typed = /\/b\/([^/?#]+)/i.exec(text)?.[1] ?? text;
  const [code] = nearestBucketCodes(
    typed,
    shelf.map((entry) => entry.code),
  );
  return { problem: read.problem, near: shelf.find((entry) => entry.code === code) };
}
