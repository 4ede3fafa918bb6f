import { Mod37_36 } from '@konfirm/iso7064';

/** Digits and letters that are not mistaken for one another under ink: no 0 O 1 I L 5 S 8 B 2-like Z, no U beside V. */
export const CODE_ALPHABET = '234679ACDEFGHJKMNPQRTVWXY';

const HEADS = CODE_ALPHABET.length ** 4;
/** Of any twelve last characters at least one has a check character inside the alphabet: 36 − 25 = 11 do not. */
const BLOCK = 12;
const BLOCKS = 2;

/** Codes that one install can make. */
export const CODES_PER_PREFIX = HEADS * BLOCKS;

export class BucketCodeError extends Error {
  override name = 'BucketCodeError';
}

/**
 * Two characters of the install's prefix, five counted, one check character (ISO/IEC 7064 MOD 37,36), without a dash.
 * Different counters give different codes. @param counter 0 to CODES_PER_PREFIX − 1 @throws BucketCodeError
 */
export function makeBucketCode(stationPrefix: string, counter: number): string {
  if (!isPrefix(stationPrefix)) throw new BucketCodeError(`"${stationPrefix}" is not a code prefix.`);
  if (!Number.isSafeInteger(counter) || counter < 0 || counter >= CODES_PER_PREFIX) {
    throw new BucketCodeError(`Counter ${counter} is outside 0 to ${CODES_PER_PREFIX - 1}.`);
  }
  const head = stationPrefix + inAlphabet(Math.floor(counter / BLOCKS), 4);
  const start = (counter % BLOCKS) * BLOCK;
  for (const last of CODE_ALPHABET.slice(start, start + BLOCK)) {
    const check = Mod37_36.checksum(head + last);
    if (CODE_ALPHABET.includes(check)) return head + last + check;
  }
  throw new BucketCodeError('No check character inside the alphabet.');
}

/** Prefix number `n` of a shop, two characters; undefined when all are given. */
export function codePrefix(n: number): string | undefined {
  return n >= 0 && n < CODE_ALPHABET.length ** 2 ? inAlphabet(n, 2) : undefined;
}

/** Reads a typed code or a scanned address; spaces, dashes and small letters do not matter. */
export function parseBucketCode(text: string): { code: string } | { problem: string } {
  const address = /\/B\/([^/?#]+)/i.exec(text)?.[1];
  const code = (address ?? text).toUpperCase().replace(/[\s\-–]/g, '');
  if (code.length !== 8) return { problem: `A tub code has 8 characters, this has ${code.length}.` };
  const foreign = [...code].find((letter) => !CODE_ALPHABET.includes(letter));
  if (foreign !== undefined) return { problem: `Tub codes never use “${foreign}”. Look again.` };
  if (!Mod37_36.validate(code)) return { problem: 'One character is wrong: the check character does not fit.' };
  return { code };
}

/** "MN7W-YDF4" */
export function formatBucketCode(code: string): string {
  return `${code.slice(0, 4)}-${code.slice(4)}`;
}

/** Known codes that differ from the typed one in a single character. */
export function nearestBucketCodes(text: string, known: readonly string[]): string[] {
  const typed = text.toUpperCase().replace(/[\s\-–]/g, '');
  return known.filter((code) => {
    if (code.length !== typed.length) return false;
    return [...code].filter((letter, n) => letter !== typed[n]).length === 1;
  });
}

function isPrefix(text: string): boolean {
  return text.length === 2 && [...text].every((letter) => CODE_ALPHABET.includes(letter));
}

function inAlphabet(value: number, length: number): string {
  let rest = value;
  let text = '';
  for (let n = 0; n < length; n++) {
    text = (CODE_ALPHABET[rest % CODE_ALPHABET.length] as string) + text;
    rest = Math.floor(rest / CODE_ALPHABET.length);
  }
  return text;
}
