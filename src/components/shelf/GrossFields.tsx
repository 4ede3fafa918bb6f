import { useEffect, useRef } from 'react';
import { useStation } from '#components/ui/station-context.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import { Problem } from './Problem.tsx';
import type { GrossText } from './read-gross.ts';
import type { GrossEntry } from './use-gross-entry.ts';

const STEP = 100 as Milligrams;

/** Gross and tare side by side; the keypad below or a keyboard writes into the one chosen. */
export function GrossFields({ entry }: { entry: GrossEntry }) {
  const { verdict, tried } = entry;
  const { locale } = useStation().station.shop;
  const problem = verdict.state === 'problem' ? verdict : undefined;
  const belowTare =
    verdict.state === 'below-tare'
      ? `Gross is below the tare of ${formatGrams(verdict.tareMg, STEP, locale)} g. Weigh again.`
      : undefined;
  const grossProblem =
    problem?.field === 'gross'
      ? problem.problem
      : tried
        ? (belowTare ?? (verdict.state === 'empty' ? 'Type what the scale shows, in g.' : undefined))
        : undefined;
  return (
    <div className="stack">
      <div className="gross-fields">
        <Field entry={entry} field="gross" label="Gross in g, no lid" problem={grossProblem} />
        <Field
          entry={entry}
          field="tare"
          label="Tare in g"
          problem={problem?.field === 'tare' ? problem.problem : undefined}
        />
      </div>
      <Problem id="gross-problem" text={grossProblem} />
      <Problem id="tare-problem" text={problem?.field === 'tare' ? problem.problem : undefined} />
      {belowTare !== undefined && !tried ? <p className="ink2">Still below the tare.</p> : null}
    </div>
  );
}

function Field({
  entry,
  field,
  label,
  problem,
}: {
  entry: GrossEntry;
  field: keyof GrossText;
  label: string;
  problem: string | undefined;
}) {
  const input = useRef<HTMLInputElement>(null);
  useEffect(() => {
    if (entry.field === field) input.current?.focus();
  }, [entry.field, field, entry.turn]);
  return (
    <label className="field">
      <span>{label}</span>
      {/* The keypad on the page takes the place of the phone's own. */}
      <input
        ref={input}
        inputMode="none"
        autoComplete="off"
        value={entry.text[field]}
        data-chosen={entry.field === field}
        aria-invalid={problem !== undefined}
        aria-describedby={`${field}-problem`}
        onFocus={(event) => {
          entry.chooseField(field);
          event.currentTarget.select();
        }}
        onChange={(event) => entry.setText(field, event.target.value)}
      />
    </label>
  );
}
