import { useMemo, useState } from 'react';
import { v7 as uuidv7 } from 'uuid';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import type { Weighing } from '#contract/weighing.ts';
import type { Milligrams } from '#domain/mass.ts';
import { parseMass } from '#domain/parse-mass.ts';
import { finishWeighing, takeBucketCode } from '#offline/record-operation.ts';
import { fittingContainers, potVolumeMl } from './pot-volume.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

export interface FinishEntry {
  massMg: number;
  volumeMl: number;
  containers: readonly Row<'containers'>[];
  container: Row<'containers'> | undefined;
  chooseContainer: (id: string) => void;
  tareText: string;
  setTareText: (text: string) => void;
  locationId: string | null;
  setLocationId: (id: string | null) => void;
  problem: string | undefined;
  saving: boolean;
  /** Records the batch; `light` null leaves it unreleased. Then the label. */
  save: (light: string | null) => Promise<void>;
}

/** Container, tare as weighed, place; then the whole batch as one operation. */
export function useFinish(weighing: Weighing, facts: WeighFacts): FinishEntry {
  const { station } = useStation();
  const massMg = weighing.additions.reduce((sum, addition) => sum + addition.actualMg, 0);
  const volumeMl = useMemo(
    () => potVolumeMl(weighing.additions, weighing.leftovers, facts.components),
    [weighing, facts],
  );
  const containers = useMemo(() => fittingContainers([...facts.containers.values()], volumeMl), [facts, volumeMl]);
  const [chosen, setChosen] = useState<string>();
  const [typedTare, setTypedTare] = useState<string>();
  const [locationId, setLocationId] = useState<string | null>(null);
  const [problem, setProblem] = useState<string>();
  const [saving, setSaving] = useState(false);
  const container = containers.find((entry) => entry.id === chosen) ?? containers[0];
  const tareText = typedTare ?? (container === undefined ? '' : (container.tareMg / 1000).toFixed(1));

  async function save(light: string | null) {
    const tare = readTare(tareText);
    if (container === undefined) return setProblem('No container holds this. Ask a manager to add one.');
    if (tare === undefined) return setProblem('Type the tare in grams, for instance 68.0.');
    setSaving(true);
    const code = await takeBucketCode(station);
    const filled = {
      bucketId: uuidv7(),
      code,
      containerId: container.id,
      tareMg: tare,
      massMg: massMg as Milligrams,
      locationId,
    };
    await finishWeighing(station, weighing, {
      type: 'batch-mixed',
      body: {
        batchId: weighing.id,
        formulaId: weighing.formulaId,
        revision: weighing.revision,
        plannedMg: weighing.plannedMg,
        jobId: weighing.jobId,
        rush: weighing.rush,
        additions: asDisplayed(weighing.additions, facts.buckets),
        release: light === null ? null : { light, byEye: true, at: new Date().toISOString() },
        filled: [filled],
      },
    });
    location.assign(`/label?tub=${code}&new`);
  }
  return {
    massMg,
    volumeMl,
    containers,
    container,
    chooseContainer: (id) => {
      setChosen(id);
      setTypedTare(undefined);
    },
    tareText,
    setTareText: setTypedTare,
    locationId,
    setLocationId,
    problem,
    saving,
    save: (light) => save(light).catch((error: unknown) => fail(error)),
  };

  function fail(error: unknown) {
    setSaving(false);
    setProblem(error instanceof Error ? error.message : 'Not saved. Try again.');
  }
}

/** What each leftover was by this device's books: fixed with the batch, so that it stays the same batch. */
function asDisplayed(additions: Weighing['additions'], buckets: WeighFacts['buckets']): Weighing['additions'] {
  return additions.map((addition) => {
    const tub = addition.kind === 'bucket' ? buckets.get(addition.bucketId) : undefined;
    if (tub === undefined) return addition;
    const { balanceMg, grade, generation } = tub;
    return { ...addition, displayed: { balanceMg, grade, generation } };
  });
}

/** A tare may be zero (the pot itself was tared); anything else reads like a mass. */
function readTare(text: string): Milligrams | undefined {
  if (/^0+([.,]0*)?$/.test(text.trim())) return 0 as Milligrams;
  const read = parseMass(text, { unit: 'g' });
  return 'mass' in read ? read.mass : undefined;
}
