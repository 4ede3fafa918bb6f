import type { ReactNode } from 'react';
import { Keypad } from '#components/ui/Keypad.tsx';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import { GrossFields } from './GrossFields.tsx';
import { Problem } from './Problem.tsx';
import { SheetTop } from './SheetTop.tsx';
import type { GrossVerdict } from './read-gross.ts';
import type { GrossEntry } from './use-gross-entry.ts';
import type { Recorder } from './use-record.ts';

type Weighed = Extract<GrossVerdict, { state: 'ok' }>;

interface Props {
  title: string;
  /** The verb on the key: "Return 412.0 g". */
  verb: string;
  tub: Row<'buckets'>;
  entry: GrossEntry;
  recorder: Recorder;
  /** The live result beside the net: "used 438.0 g". */
  besides: (weighed: Weighed['weighed']) => string;
  onSave: (weighed: Weighed) => void;
  onClose: () => void;
  children?: ReactNode;
}

/** A tub on the scale: gross, tare, keypad, the live net, and a question when it is heavier than recorded. */
export function GrossSheet(props: Props) {
  const { entry, verb, recorder } = props;
  const { locale } = useStation().station.shop;
  const grams = (mg: number) => formatGrams(mg as Milligrams, 100 as Milligrams, locale);
  const ok = entry.verdict.state === 'ok' ? entry.verdict : undefined;
  const net = ok === undefined ? undefined : grams(ok.weighed.netMg);
  return (
    <form
      className="gross-form"
      onSubmit={(event) => {
        event.preventDefault();
        const weighed = entry.submit();
        if (weighed !== undefined) props.onSave(weighed);
      }}
    >
      <SheetTop title={props.title} tub={props.tub} onClose={props.onClose} />
      <div className="gross-cols">
        <div className="stack gap-3">
          <GrossFields entry={entry} />
          <p className="net" aria-live="polite" data-net={ok?.weighed.netMg}>
            {ok === undefined ? (
              <span className="ink2">Recorded {grams(props.tub.balanceMg)} g</span>
            ) : (
              <>
                <b>Net {net} g</b> · {ok.weighed.netMg === 0 ? 'empty · ' : ''}
                {props.besides(ok.weighed)}
              </>
            )}
          </p>
        </div>
        {/* The field keeps the focus, so that a keyboard goes on writing where the keypad does. */}
        <div className="gross-pad" onMouseDown={(event) => event.preventDefault()}>
          <Keypad onKey={entry.type} />
        </div>
        {props.children === undefined ? null : <div className="stack gap-3">{props.children}</div>}
      </div>
      <div className="dock stack">
        <Problem text={recorder.problem} />
        {entry.asked && ok !== undefined ? (
          <>
            <p role="alert">
              <span className="badge warn g-warn whitespace-normal">
                {grams(ok.weighed.heavierMg)} g more than recorded. Right tub, lid off?
              </span>
            </p>
            <button type="button" className="key wide" onClick={entry.weighAgain}>
              Weigh again
            </button>
          </>
        ) : null}
        <button type="submit" className={`key wide ${ok === undefined ? 'log-key' : 'go'}`} disabled={recorder.saving}>
          {net === undefined ? 'Type the gross' : entry.asked ? `Yes, record ${net} g` : `${verb} ${net} g`}
        </button>
      </div>
    </form>
  );
}
