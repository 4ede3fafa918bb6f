import { useState } from 'react';
import { Mass } from '#components/ui/Mass.tsx';
import { Top } from '#components/ui/Top.tsx';
import type { Weighing } from '#contract/weighing.ts';
import { ContainerPicker } from './ContainerPicker.tsx';
import { UndoKey } from './UndoKey.tsx';
import { useFinish } from './use-finish.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

const LIGHTS = ['Daylight D65', 'Shop light', 'Warm light'];

/** Stir, check the drawdown, fill: one screen, and one operation in the log. */
export function Finish({ weighing, facts }: { weighing: Weighing; facts: WeighFacts }) {
  const finish = useFinish(weighing, facts);
  const [light, setLight] = useState<string | null>(null);
  return (
    <>
      <Top
        title={facts.formula.name}
        sub="Stir, check, fill"
        back={{ href: '/', label: 'Leave, the batch stays open' }}
      >
        <UndoKey weighing={weighing} facts={facts} />
      </Top>
      <div className="tablet:grid-cols-2 tablet:gap-8 grid content-start gap-6">
        <section className="stack gap-4">
          <p className="text-30 leading-tight font-bold">
            <Mass mg={finish.massMg} step={facts.scale.readabilityMg} /> in the pot
          </p>
          <ol className="card grid gap-2">
            <li className="g g-ok">Stir. Scrape sides and bottom. Stir again.</li>
            <li className="g g-ok">Draw down on the garment, cure, compare.</li>
          </ol>
          <p className="small ink2">
            Gloves and fresh air. Cure to the ink maker's data sheet, then wash-test. Your local rules and the
            supplier's safety data sheet decide.
          </p>
          <fieldset className="stack">
            <legend className="text-24 pb-2 font-bold">Colour is right under</legend>
            <div className="grid gap-2" role="radiogroup" aria-label="Light">
              {LIGHTS.map((name) => (
                <button
                  key={name}
                  type="button"
                  role="radio"
                  aria-checked={light === name}
                  className="key"
                  onClick={() => setLight(name)}
                >
                  {name}
                </button>
              ))}
            </div>
          </fieldset>
        </section>
        <ContainerPicker finish={finish} facts={facts} />
      </div>
      <div className="dock stack tablet:sticky static">
        {finish.problem === undefined ? null : (
          <p className="badge warn g-warn whitespace-normal" role="alert">
            {finish.problem}
          </p>
        )}
        <button
          type="button"
          className={`key wide ${light === null ? 'log-key' : 'go'}`}
          disabled={light === null || finish.saving}
          onClick={() => void finish.save(light)}
        >
          {light === null ? 'Choose the light to release' : 'Release and label'}
        </button>
        <button type="button" className="key text wide" disabled={finish.saving} onClick={() => void finish.save(null)}>
          Label now, release later
        </button>
      </div>
    </>
  );
}
