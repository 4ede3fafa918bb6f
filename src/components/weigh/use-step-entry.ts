import { useEffect, useMemo, useState } from 'react';
import { typeDigit } from '#components/ui/typed-digits.ts';
import { useStation } from '#components/ui/station-context.ts';
import { whyUnsaved } from '#components/ui/why-unsaved.ts';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { parseMass } from '#domain/parse-mass.ts';
import { saveWeighing } from '#offline/weighings.ts';
import { logAddition } from './log-addition.ts';
import { type Overshoot, judgeReading } from './judge-reading.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

export interface StepEntry {
  text: string;
  mass: Milligrams | undefined;
  problem: string | undefined;
  /** Why the last entry did not reach the disk. */
  unsaved: string | undefined;
  onTarget: boolean;
  /** Set when logging this would need a repair. */
  over: Overshoot | undefined;
  /** A tub was to be scraped empty and the reading is off: it must be asked whether some is left in it. */
  asksEmptied: boolean;
  type: (key: string) => void;
  /** `emptied`: the leftover's tub is empty now; as planned when left out. */
  log: (emptied?: boolean) => Promise<void>;
  logging: boolean;
}

/** Two in a hundred less than the books say is what a wall keeps; more than that is asked about. */
const ASK_BELOW = 0.98;

/** The reading of one step, typed on the keypad or the keyboard, and what logging it means. */
export function useStepEntry(weighing: Weighing, facts: WeighFacts): StepEntry {
  const { station } = useStation();
  const step = weighing.remaining[0];
  const [text, setText] = useState('');
  const [logging, setLogging] = useState(false);
  const [unsaved, setUnsaved] = useState<string>();
  const empties = step?.kind === 'bucket' && step.empties;
  const type = (key: string) => setText((before) => typeDigit(before, key));
  useKeyboard(type);
  const read = useMemo(() => readText(text, facts), [text, facts]);
  const verdict = useMemo(
    () => (read.mass === undefined ? undefined : judgeReading(weighing, facts, read.mass)),
    [weighing, facts, read],
  );

  async function log(emptied: boolean = empties) {
    if (read.mass === undefined || step === undefined || logging) return;
    setLogging(true);
    setUnsaved(undefined);
    const lotId = step.kind === 'component' ? (facts.lots.get(step.componentId)?.id ?? null) : null;
    const next = logAddition(
      weighing,
      { actual: read.mass, lotId, actorId: station.person.id, emptied },
      {
        target: facts.target,
        tolerance: facts.tolerance,
        readability: facts.scale.readabilityMg as Milligrams,
        now: new Date(),
      },
    );
    try {
      await saveWeighing(station, next, weighing);
      navigator.vibrate?.(60);
    } catch (error) {
      setLogging(false);
      setUnsaved(whyUnsaved(error));
    }
  }
  return {
    text,
    ...read,
    unsaved,
    onTarget: verdict?.onTarget ?? false,
    over: verdict?.over,
    asksEmptied: empties && read.mass !== undefined && read.mass < step.plannedMg * ASK_BELOW,
    type,
    log,
    logging,
  };
}

function readText(text: string, facts: WeighFacts): { mass: Milligrams | undefined; problem: string | undefined } {
  if (text === '') return { mass: undefined, problem: undefined };
  const read = parseMass(text, {
    unit: 'g',
    readability: facts.scale.readabilityMg as Milligrams,
    maximum: facts.scale.maximumMg as Milligrams,
  });
  return 'mass' in read ? { mass: read.mass, problem: undefined } : { mass: undefined, problem: read.problem };
}

/** Digits, comma, point and erase from a keyboard go to the reading, wherever the focus is. */
function useKeyboard(type: (key: string) => void): void {
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || event.target instanceof HTMLInputElement) return;
      if (/^[0-9.,]$/.test(event.key) || event.key === 'Backspace') {
        event.preventDefault();
        type(event.key);
      }
    };
    window.addEventListener('keydown', press);
    return () => window.removeEventListener('keydown', press);
  });
}
