/** The last entry of each install that was known when something was recorded, by install. */
export type Seen = Readonly<Record<string, number>>;

/** One install's entry on a tub, with what it knew of that tub; never by the clock of a device. */
export interface SeenEntry {
  opId: string;
  installId: string;
  deviceSeq: number;
  seen: Seen;
}

/** What an entry knew, itself included: entries of one tub are compared by it. */
export function knowledgeOf({ installId, deviceSeq, seen }: Omit<SeenEntry, 'opId'>): Seen {
  return { ...seen, [installId]: Math.max(seen[installId] ?? 0, deviceSeq) };
}

/** True when `later` knew all that `earlier` knew, which makes it the later one wherever they were recorded. */
export function covers(later: Seen, earlier: Seen): boolean {
  return Object.entries(earlier).every(([install, seq]) => seq <= (later[install] ?? 0));
}

/** The least knowledge that covers both. */
export function joinSeen(one: Seen, other: Seen): Seen {
  const joined: Record<string, number> = { ...one };
  for (const [install, seq] of Object.entries(other)) joined[install] = Math.max(joined[install] ?? 0, seq);
  return joined;
}

/** Who knows more has the greater size: an order by it never contradicts `covers`. */
export function sizeOf(known: Seen): number {
  return Object.values(known).reduce((sum, seq) => sum + seq, 0);
}
