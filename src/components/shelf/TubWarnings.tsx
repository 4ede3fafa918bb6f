import { recountWords } from '#components/ui/recount-words.ts';
import type { Row } from '#contract/rows.ts';
import type { Act } from './bucket-acts.ts';
import { isPastUseBy } from './describe-bucket.ts';

/** What keeps this ink from being used as it is, each with its word and what to do. */
export function TubWarnings({ tub, acts }: { tub: Row<'buckets'>; acts: readonly Act[] }) {
  const lines = warningsOf(tub, acts);
  if (lines.length === 0) return null;
  return (
    <ul className="stack" aria-label="Mind">
      {lines.map((line) => (
        <li key={line}>
          <span className="badge warn g-warn whitespace-normal">{line}</span>
        </li>
      ))}
    </ul>
  );
}

function warningsOf(tub: Row<'buckets'>, acts: readonly Act[]): string[] {
  const lines: string[] = [];
  if (tub.state === 'quarantine') lines.push('In quarantine. Do not use it.');
  if (tub.state === 'empty') lines.push('Empty. Ink in it? Return it.');
  if (tub.state === 'discarded') lines.push('Discarded. Do not use it.');
  const doubt = recountWords(tub);
  if (doubt !== undefined) lines.push(`${doubt}. Re-weigh it.`);
  if (tub.state === 'empty' || tub.state === 'discarded') return lines;
  if (!tub.released) lines.push(acts.includes('issue') ? 'Not released.' : 'Not released. Ask a mixer first.');
  if (isPastUseBy(tub, new Date())) lines.push('Past its use-by.');
  if (tub.reservedFor !== null) lines.push(`Kept for ${tub.reservedFor}.`);
  return lines;
}
