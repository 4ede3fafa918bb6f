import { useMemo } from 'react';
import { formatDay } from '#components/ui/format-time.ts';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { LabelContent } from './label-content.ts';

const STEP = 100 as Milligrams;

/** What stands on the tub's label; never a net mass that goes stale. */
export function useLabelContent(bucket: Row<'buckets'> | undefined): LabelContent | undefined {
  const { station } = useStation();
  const formulas = useFormulas();
  const [families, people, jobs] = [useRows('families'), useRows('people'), useRows('jobs')];
  return useMemo(() => {
    if (!bucket || !formulas || !families || !people || !jobs) return undefined;
    const { locale } = station.shop;
    const grams = (mg: number) => formatGrams(mg as Milligrams, STEP, locale);
    const formula = bucket.formulaId === null ? undefined : formulas.get(bucket.formulaId);
    const family = families.get(bucket.familyId)?.name;
    const by = bucket.filledBy === null ? undefined : people.get(bucket.filledBy)?.displayName;
    const job = bucket.jobId === null ? undefined : jobs.get(bucket.jobId);
    return {
      code: bucket.code,
      name: bucket.name,
      formula: [formula === undefined ? undefined : `${formula.code} r${bucket.revision}`, family]
        .filter(Boolean)
        .join(' · '),
      lines: [
        [`Filled ${grams(bucket.filledMg)} g`, formatDay(bucket.filledAt, locale), by].filter(Boolean).join(' · '),
        [`Tare ${grams(bucket.tareMg)} g, no lid`, job?.number].filter(Boolean).join(' · '),
        [
          bucket.useBy === null ? undefined : `Use by ${formatDay(bucket.useBy, locale)}`,
          bucket.cureC === null ? undefined : `cure ${bucket.cureC} °C`,
        ]
          .filter(Boolean)
          .join(' · '),
        [
          bucket.generation > 0 ? 'Contains returned ink' : 'No returned ink',
          ...bucket.restrictions,
          bucket.released ? undefined : 'NOT RELEASED',
        ]
          .filter(Boolean)
          .join(' · '),
      ].filter((line) => line !== ''),
      hazards: [...bucket.hazards, "See the supplier's safety data sheet."].join(' '),
      address: `${location.origin}/b/${bucket.code}`.toUpperCase(),
    };
  }, [bucket, formulas, families, people, jobs, station]);
}
