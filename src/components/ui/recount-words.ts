import type { Row } from '#contract/rows.ts';
import type { RecountReason } from '#domain/needs-recount.ts';
import { recountReasonOf } from '#domain/tub-trace.ts';

const WORDS: Record<RecountReason, string> = {
  'both-spent': 'Two devices used it, neither saw the other',
  'spent-and-discarded': 'One device discarded it, another used it',
  'spent-across-recount': 'Used by a device that had not seen the last re-weigh',
  'weighed-twice': 'Two devices re-weighed it, neither saw the other',
  'long-unweighed': 'Used many times since it was last weighed',
  'below-nothing': 'Less than nothing left in the books',
};

/** Why a tub must be weighed again, in a few words; undefined when it need not. */
export function recountWords(tub: Pick<Row<'buckets'>, 'needsRecount' | 'trace' | 'balanceMg'>): string | undefined {
  if (!tub.needsRecount) return undefined;
  const reason = recountReasonOf(tub);
  return reason === null ? 'Two records disagree' : WORDS[reason];
}
