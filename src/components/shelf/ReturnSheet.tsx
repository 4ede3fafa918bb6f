import { useState } from 'react';
import { Choices } from '#components/ui/Choices.tsx';
import { useStation } from '#components/ui/station-context.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { SheetProps } from './ActSheet.tsx';
import { GrossSheet } from './GrossSheet.tsx';
import { PlaceField } from './PlaceField.tsx';
import { useGrossEntry } from './use-gross-entry.ts';
import { useRecord } from './use-record.ts';

type Condition = Extract<OperationBody, { type: 'bucket-returned' }>['body']['condition'];

const CONDITIONS: readonly { value: Condition; name: string; means?: string }[] = [
  { value: 'clean', name: 'Clean' },
  { value: 'lint', name: 'Lint', means: 'Lint: strain before use.' },
  { value: 'reduced', name: 'Reduced', means: 'Reduced: write it on the tub.' },
  { value: 'dirty', name: 'Dirty', means: 'Dirty: goes to quarantine.' },
];

/** A tub back from the press: weighed with its ink, its condition, its place. */
export function ReturnSheet({ tub, facts, onClose, onDone }: SheetProps) {
  const { locale } = useStation().station.shop;
  const entry = useGrossEntry(tub, facts.scales);
  const recorder = useRecord(onDone);
  const [condition, setCondition] = useState<Condition>('clean');
  const [locationId, setLocationId] = useState(tub.locationId);
  const grams = (mg: number) => formatGrams(mg as Milligrams, 100 as Milligrams, locale);
  const place = locationId === null ? undefined : facts.locations.get(locationId)?.code;
  const means = CONDITIONS.find((choice) => choice.value === condition)?.means;
  return (
    <GrossSheet
      title="Return"
      verb="Return"
      tub={tub}
      entry={entry}
      recorder={recorder}
      besides={({ deltaMg }) =>
        deltaMg > 0 ? `${grams(deltaMg)} g more than recorded` : `used ${grams(Math.abs(deltaMg))} g`
      }
      onClose={onClose}
      onSave={({ grossMg, tareMg, weighed }) =>
        void recorder.record(
          {
            type: 'bucket-returned',
            body: {
              bucketId: tub.id,
              jobId: tub.jobId,
              grossMg,
              tareMg,
              displayedMg: tub.balanceMg,
              deltaMg: weighed.deltaMg,
              condition,
              locationId,
            },
          },
          noteOf(grams(weighed.netMg), condition, place),
        )
      }
    >
      <Choices
        label="Condition"
        className="conditions"
        options={CONDITIONS}
        value={condition}
        onChoose={setCondition}
      />
      {means === undefined ? null : (
        <p className={condition === 'dirty' ? 'badge warn g-warn justify-self-start' : 'ink2'} role="status">
          {means}
        </p>
      )}
      <PlaceField locations={facts.locations} value={locationId} onChoose={setLocationId} />
    </GrossSheet>
  );
}

function noteOf(net: string, condition: Condition, place: string | undefined): string {
  if (condition === 'dirty') return `Returned ${net} g to quarantine.`;
  return place === undefined ? `Returned ${net} g.` : `Returned ${net} g to ${place}.`;
}
