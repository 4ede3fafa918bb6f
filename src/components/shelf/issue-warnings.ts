import type { Row } from '#contract/rows.ts';

/** What speaks against this ink on this job's garment; a warning, the press decides. Cure in °C. */
export function whyNotForJob(
  tub: Pick<Row<'buckets'>, 'cureC' | 'restrictions' | 'formulaId'>,
  job: Pick<Row<'jobs'>, 'number' | 'maxCureC' | 'compliance' | 'colours'>,
): string[] {
  const warnings: string[] = [];
  if (!job.colours.some((colour) => colour.formulaId === tub.formulaId)) {
    warnings.push(`${job.number} does not ask for this colour.`);
  }
  if (job.maxCureC !== null && tub.cureC !== null && tub.cureC > job.maxCureC) {
    warnings.push(`Cures at ${tub.cureC} °C, the garment takes ${job.maxCureC} °C.`);
  }
  for (const restriction of tub.restrictions.filter((entry) => job.compliance.includes(entry))) {
    warnings.push(`The job rules out: ${restriction}.`);
  }
  return warnings;
}
