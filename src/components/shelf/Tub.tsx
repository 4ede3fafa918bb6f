import { useEffect, useRef } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import type { Row } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { ActKeys } from './ActKeys.tsx';
import { TubContent } from './TubContent.tsx';
import { TubFacts } from './TubFacts.tsx';
import { TubWarnings } from './TubWarnings.tsx';
import type { Act } from './bucket-acts.ts';
import { GRADES } from './describe-bucket.ts';
import type { SheetAct } from './use-act.ts';
import type { ShopFacts } from './use-shop-facts.ts';

/** Longer names take the whole width, the mass its own line. */
const LONG_NAME = 26;

interface Props {
  tub: Row<'buckets'>;
  facts: ShopFacts;
  acts: readonly Act[];
  /** What was just recorded; it stays until the next act. */
  note: string | undefined;
  onAct: (act: SheetAct) => void;
}

export function Tub({ tub, facts, acts, note, onAct }: Props) {
  const grade = GRADES[tub.grade];
  const formula = tub.formulaId === null ? undefined : facts.formulas.get(tub.formulaId);
  return (
    <>
      <Top title={formatBucketCode(tub.code)} back={backToShelf()}>
        <span className={`badge ${grade.glyph}`}>{grade.word}</span>
      </Top>
      {note === undefined ? null : <DoneNote text={note} />}
      <div className="bucket-cols stack">
        <section className="hero stack gap-3" aria-label="Tub">
          <Strip lab={tub.lab} hiding={tub.hiding} />
          <div className={tub.name.length > LONG_NAME ? 'name long' : 'name'}>
            <div>
              <h2>{tub.name}</h2>
              <span className="ink2">
                {formula === undefined ? 'No formula' : `${formula.code} r${tub.revision}`} ·{' '}
                <span className="whitespace-nowrap">
                  of <Mass mg={tub.filledMg} />
                </span>
              </span>
            </div>
            <span className="num" data-balance={tub.balanceMg}>
              <Mass mg={tub.balanceMg} />
            </span>
          </div>
          <TubWarnings tub={tub} acts={acts} />
          <TubFacts tub={tub} facts={facts} />
        </section>
        <TubContent tub={tub} facts={facts} />
      </div>
      <ActKeys tub={tub} acts={acts} onAct={onAct} />
    </>
  );
}

/** Where it was recorded stands beside it: "On this device" until it is sent. */
function DoneNote({ text }: { text: string }) {
  const note = useRef<HTMLDivElement>(null);
  useEffect(() => note.current?.focus(), [text]);
  return (
    <div ref={note} className="note" role="status" tabIndex={-1}>
      <span className="g g-ok">{text}</span>
      <SyncChip />
    </div>
  );
}

/** Back to the shelf as it was left, search and place on the page included, when one came from there. */
function backToShelf() {
  const fromShelf = document.referrer.startsWith(`${location.origin}/shelf`) && history.length > 1;
  return { href: '/shelf', label: 'Back to the Shelf', ...(fromShelf ? { onGo: () => history.back() } : {}) };
}
