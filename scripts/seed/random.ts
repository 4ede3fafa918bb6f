/** Numbers that are the same in every run: mulberry32 (public domain). */
export interface Random {
  /** 0 ≤ x < 1 */
  next: () => number;
  /** Whole, both ends included. */
  int: (least: number, most: number) => number;
  pick: <T>(list: readonly T[]) => T;
  uuid: () => string;
}

export function seededRandom(seed: number): Random {
  let state = seed >>> 0;
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  const int = (least: number, most: number) => least + Math.floor(next() * (most - least + 1));
  const hex = (length: number) => Array.from({ length }, () => int(0, 15).toString(16)).join('');
  return {
    next,
    int,
    pick: (list) => list[int(0, list.length - 1)] as (typeof list)[number],
    uuid: () => `${hex(8)}-${hex(4)}-4${hex(3)}-${int(8, 11).toString(16)}${hex(3)}-${hex(12)}`,
  };
}
