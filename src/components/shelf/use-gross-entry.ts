import { useMemo, useRef, useState } from 'react';
import { typeDigit } from '#components/ui/typed-digits.ts';
import type { Row } from '#contract/rows.ts';
import { type GrossText, type GrossVerdict, readGross, scaleLimits, typedGrams } from './read-gross.ts';

type Field = keyof GrossText;

export interface GrossEntry {
  text: GrossText;
  setText: (field: Field, text: string) => void;
  /** The field that the keypad writes into; a field just chosen is written anew. */
  field: Field;
  chooseField: (field: Field) => void;
  type: (key: string) => void;
  verdict: GrossVerdict;
  /** True once Save was hit with something wrong. */
  tried: boolean;
  /** True once it was heavier than recorded and that is being asked about. */
  asked: boolean;
  /** Counts the times the chosen field is to take the focus again. */
  turn: number;
  /** What may be recorded now; undefined: there is something to mend or to answer first. */
  submit: () => Extract<GrossVerdict, { state: 'ok' }> | undefined;
  weighAgain: () => void;
}

/** Gross and tare typed on the keypad or a keyboard, and whether they may be saved. */
export function useGrossEntry(tub: Row<'buckets'>, scales: readonly Row<'scales'>[]): GrossEntry {
  const [text, setBoth] = useState<GrossText>({ gross: '', tare: typedGrams(tub.tareMg) });
  const [field, setField] = useState<Field>('gross');
  const [tried, setTried] = useState(false);
  const [asked, setAsked] = useState(false);
  const [turn, setTurn] = useState(0);
  const anew = useRef(false);
  const limits = useMemo(() => scaleLimits(scales), [scales]);
  const verdict = useMemo(() => readGross(text, tub.balanceMg, limits), [text, tub.balanceMg, limits]);
  const setText = (which: Field, next: string) => {
    anew.current = false;
    setAsked(false);
    setTried(false);
    setBoth((before) => ({ ...before, [which]: next }));
  };
  return {
    text,
    setText,
    field,
    chooseField: (next) => {
      anew.current = true;
      setField(next);
    },
    type: (key) => setText(field, typeDigit(anew.current ? '' : text[field], key)),
    verdict,
    tried,
    asked,
    turn,
    submit: () => {
      if (verdict.state !== 'ok') {
        setTried(true);
        setTurn(turn + 1);
        return undefined;
      }
      if (verdict.weighed.heavierMg > (limits.readability ?? 0) && !asked) {
        setAsked(true);
        return undefined;
      }
      return verdict;
    },
    weighAgain: () => {
      setText('gross', '');
      setField('gross');
      setTurn(turn + 1);
    },
  };
}
