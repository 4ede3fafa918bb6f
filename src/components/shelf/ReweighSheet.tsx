import { useStation } from '#components/ui/station-context.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { SheetProps } from './ActSheet.tsx';
import { GrossSheet } from './GrossSheet.tsx';
import { useGrossEntry } from './use-gross-entry.ts';
import { useRecord } from './use-record.ts';

/** What is really in it, by the scale; the books follow. */
export function ReweighSheet({ tub, facts, onClose, onDone }: SheetProps) {
  const { locale } = useStation().station.shop;
  const entry = useGrossEntry(tub, facts.scales);
  const recorder = useRecord(onDone);
  const grams = (mg: number) => formatGrams(mg as Milligrams, 100 as Milligrams, locale);
  return (
    <GrossSheet
      title="Re-weigh"
      verb="Record"
      tub={tub}
      entry={entry}
      recorder={recorder}
      besides={({ deltaMg }) =>
        deltaMg === 0 ? 'as recorded' : `${grams(Math.abs(deltaMg))} g ${deltaMg > 0 ? 'more' : 'less'} than recorded`
      }
      onClose={onClose}
      onSave={({ grossMg, tareMg, weighed }) =>
        void recorder.record(
          {
            type: 'bucket-recounted',
            body: { bucketId: tub.id, grossMg, tareMg, displayedMg: tub.balanceMg, deltaMg: weighed.deltaMg },
          },
          `Re-weighed: ${grams(weighed.netMg)} g.`,
        )
      }
    />
  );
}
