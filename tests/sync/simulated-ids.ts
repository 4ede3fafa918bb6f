import type { Random } from '#scripts/seed/random.ts';

/** UUIDs of version 7 (RFC 9562, section 5.7) whose time and random bits both come from the simulation. */
export function seededIds(random: Random, now: () => number): () => string {
  return () => {
    const time = Math.floor(now()).toString(16).padStart(12, '0');
    const [, , , variant, tail] = random.uuid().split('-') as [string, string, string, string, string];
    return `${time.slice(0, 8)}-${time.slice(8)}-7${variant.slice(1)}-${variant}-${tail}`;
  };
}
