import type { Row } from '#contract/rows.ts';
import type { Milligrams } from '#domain/mass.ts';
import { parseMass } from '#domain/parse-mass.ts';
import { type WeighedTub, weighBack } from './weigh-back.ts';

export interface GrossText {
  gross: string;
  tare: string;
}

/** What the two fields say together; a problem belongs to one of them. */
export type GrossVerdict =
  | { state: 'empty' }
  | { state: 'problem'; field: keyof GrossText; problem: string }
  | { state: 'below-tare'; tareMg: Milligrams }
  | { state: 'ok'; grossMg: Milligrams; tareMg: Milligrams; weighed: WeighedTub };

/** Steps and carrying power of the station's scales: which of them weighed this tub is not asked. */
export function scaleLimits(scales: readonly Row<'scales'>[]): { readability?: Milligrams; maximum?: Milligrams } {
  if (scales.length === 0) return {};
  return {
    readability: Math.min(...scales.map((scale) => scale.readabilityMg)) as Milligrams,
    maximum: Math.max(...scales.map((scale) => scale.maximumMg)) as Milligrams,
  };
}

/** Reads gross and tare as typed, in g. @param displayedMg the content that the screen shows */
export function readGross(
  text: GrossText,
  displayedMg: number,
  limits: { readability?: Milligrams; maximum?: Milligrams },
): GrossVerdict {
  const tare = parseMass(text.tare, { unit: 'g', maximum: limits.maximum });
  if ('problem' in tare) return { state: 'problem', field: 'tare', problem: tare.problem };
  if (text.gross.trim() === '') return { state: 'empty' };
  const gross = parseMass(text.gross, { unit: 'g', ...limits });
  if ('problem' in gross) return { state: 'problem', field: 'gross', problem: gross.problem };
  const weighed = weighBack({ grossMg: gross.mass, tareMg: tare.mass, displayedMg });
  if (weighed === undefined) return { state: 'below-tare', tareMg: tare.mass };
  return { state: 'ok', grossMg: gross.mass, tareMg: tare.mass, weighed };
}

/** A mass in g as a person would type it; three decimals get a fourth, or they could mean thousands. */
export function typedGrams(mg: number): string {
  const decimals = mg % 100 === 0 ? 1 : mg % 10 === 0 ? 2 : 4;
  return (mg / 1000).toFixed(decimals);
}
