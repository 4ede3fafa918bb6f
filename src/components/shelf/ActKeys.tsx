import type { CSSProperties } from 'react';
import type { Row } from '#contract/rows.ts';
import type { Act } from './bucket-acts.ts';
import type { SheetAct } from './use-act.ts';

const NAMES: Record<Act, string> = {
  'use-up': 'Use up',
  issue: 'Issue',
  return: 'Return',
  reweigh: 'Re-weigh',
  release: 'Release',
  label: 'Print label',
  discard: 'Discard',
};
const A_ROW = 3;

/** One primary action, the others smaller; on a phone a second row of them waits below the edge. */
export function ActKeys({
  tub,
  acts,
  onAct,
}: {
  tub: Row<'buckets'>;
  acts: readonly Act[];
  onAct: (act: SheetAct) => void;
}) {
  if (acts.length === 0) {
    return (
      <div className="dock acts">
        <a className="key go" href="/scan">
          Scan another
        </a>
      </div>
    );
  }
  const others = acts.length - 1;
  return (
    <div
      className={`dock acts ${others > A_ROW ? 'deep' : ''}`}
      style={{ '--keys': others || 1, '--few': Math.min(others, A_ROW) || 1 } as CSSProperties}
    >
      {acts.map((act, n) => {
        const look = n === 0 && act !== 'label' ? 'key go' : 'key';
        const way = wayOf(act, tub);
        if (way !== undefined) {
          return (
            <a key={act} className={look} href={way}>
              {NAMES[act]}
            </a>
          );
        }
        return (
          <button key={act} id={`act-${act}`} type="button" className={look} onClick={() => onAct(act as SheetAct)}>
            {NAMES[act]}
          </button>
        );
      })}
    </div>
  );
}

/** Acts that are pages of their own. */
function wayOf(act: Act, tub: Row<'buckets'>): string | undefined {
  if (act === 'use-up') return `/mix?use=${tub.id}`;
  return act === 'label' ? `/label?tub=${tub.code}` : undefined;
}
