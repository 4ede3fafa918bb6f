import type { CSSProperties } from 'react';
import { Gauge } from '#components/ui/Gauge.tsx';
import { Keypad } from '#components/ui/Keypad.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { StepWords } from './describe-step.ts';
import type { StepEntry } from './use-step-entry.ts';

/** The reading in big digits, the Strip as gauge, and the keypad. */
export function Reading({
  entry,
  what,
  target,
  step,
}: {
  entry: StepEntry;
  what: StepWords;
  target: Milligrams;
  step: Milligrams;
}) {
  const { station } = useStation();
  const reading = entry.mass ?? (0 as Milligrams);
  const toGo = target - reading;
  const grams = (mg: number) => formatGrams(Math.abs(mg) as Milligrams, step, station.shop.locale);
  const words = toGo >= 0 ? `${grams(toGo)} g to go` : `${grams(toGo)} g over`;
  const digits = entry.text === '' ? grams(0) : entry.text;
  return (
    <>
      <section className={`panel ${entry.onTarget ? 'hit' : ''}`}>
        <p>
          <span className={entry.onTarget ? 'g g-ok' : 'ink2'}>{entry.onTarget ? 'On target' : 'Tare, then add'}</span>
          <b className="togo" aria-live="polite">
            {words}
          </b>
        </p>
        <div className="digits" style={{ '--n': Math.max(4, digits.length) } as CSSProperties}>
          {digits}
          <u>g</u>
        </div>
      </section>
      <Gauge
        lab={what.lab}
        hiding={what.hiding}
        reading={reading}
        target={target}
        label={`${grams(reading)} of ${grams(target)} g`}
      />
      <Keypad onKey={entry.type} />
    </>
  );
}
