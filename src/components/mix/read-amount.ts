import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { parseMass } from '#domain/parse-mass.ts';

export type Amount =
  | { state: 'empty'; scale: Row<'scales'> | undefined }
  | { state: 'problem'; problem: string; scale: Row<'scales'> | undefined }
  | { state: 'ok'; mass: Milligrams; scale: Row<'scales'> };

/** The typed batch mass and the scale that will weigh it: the chosen one, else the finest that can carry the batch. */
export function readAmount(text: string, scales: readonly Row<'scales'>[], scaleId: string | undefined): Amount {
  const chosen = scales.find((scale) => scale.id === scaleId);
  if (text.trim() === '') return { state: 'empty', scale: chosen ?? defaultScale(scales, 0) };
  const rough = parseMass(text, { unit: 'g' });
  if ('problem' in rough) return { state: 'problem', problem: rough.problem, scale: chosen ?? defaultScale(scales, 0) };
  const scale = chosen ?? defaultScale(scales, rough.mass);
  if (scale === undefined) return { state: 'problem', problem: 'No scale is set up. Ask a manager.', scale };
  const exact = parseMass(text, {
    unit: 'g',
    readability: scale.readabilityMg as Milligrams,
    maximum: scale.maximumMg as Milligrams,
  });
  if ('problem' in exact) return { state: 'problem', problem: exact.problem, scale };
  return { state: 'ok', mass: exact.mass, scale };
}

/** The bench scale of a tenth of a gram where it carries the batch; else the next coarser one. */
function defaultScale(scales: readonly Row<'scales'>[], mass: number): Row<'scales'> | undefined {
  const carrying = scales.filter((scale) => scale.maximumMg >= mass);
  return carrying.find((scale) => scale.readabilityMg >= 100) ?? carrying[0] ?? scales.at(-1);
}
