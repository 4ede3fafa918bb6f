import { useLiveQuery } from 'dexie-react-hooks';
import { useEffect, useState } from 'react';
import { useStation } from '#components/ui/station-context.ts';
import { type ShiftSpan, type ShiftSummary, ShiftSummaryError, summariseShift } from '#domain/shift-summary.ts';
import { type ShownShift, readShift } from '#offline/shift-facts.ts';
import { type ShiftChoice, type TypedSpan, readTyped, spanOf, toTyped } from './shift-summary-span.ts';

export interface ShownSummary {
  shown: ShownShift;
  choice: ShiftChoice;
  choose: (choice: ShiftChoice) => void;
  typed: TypedSpan;
  type: (typed: TypedSpan) => void;
  span: ShiftSpan;
  /** The summary, or why there is none of this time. */
  result: { summary: ShiftSummary } | { problem: string };
}

/** The summary of the chosen time as this device shows it; undefined until the disk has answered. */
export function useShiftSummary(): ShownSummary | undefined {
  const { station } = useStation();
  const minute = useMinute();
  const shown = useLiveQuery(() => readShift(station), [station, minute]);
  const [choice, setChoice] = useState<ShiftChoice>('today');
  const [typed, setTyped] = useState<TypedSpan>({ from: '', to: '' });
  if (shown === undefined) return undefined;
  const span = choice === 'other' ? readTyped(typed) : spanOf(choice, shown.now);
  const choose = (next: ShiftChoice) => {
    if (next === 'other') setTyped(toTyped(span));
    setChoice(next);
  };
  return { shown, choice, choose, typed, type: setTyped, span, result: summarise(span, shown) };
}

function summarise(span: ShiftSpan, { facts }: ShownShift): ShownSummary['result'] {
  try {
    return { summary: summariseShift(span, facts) };
  } catch (error) {
    if (error instanceof ShiftSummaryError) return { problem: error.message };
    throw error;
  }
}

/** Goes up by one a minute: a shift that is not over has a new end then. */
function useMinute(): number {
  const [minute, setMinute] = useState(0);
  useEffect(() => {
    const timer = setInterval(() => setMinute((before) => before + 1), 60_000);
    return () => clearInterval(timer);
  }, []);
  return minute;
}
