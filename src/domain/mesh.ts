import { CM_PER_INCH } from './units.ts';

/** Threads a centimetre and threads an inch are other units, and never passed for one another. */
export type ThreadsPerCm = number & { readonly unit: 'threads/cm' };
export type ThreadsPerInch = number & { readonly unit: 'threads/in' };

/** A mesh that cannot be woven. */
export class MeshError extends Error {
  override name = 'MeshError';
}

export function perCm(count: ThreadsPerInch): ThreadsPerCm {
  return (count / CM_PER_INCH) as ThreadsPerCm;
}

export function perInch(count: ThreadsPerCm): ThreadsPerInch {
  return (count * CM_PER_INCH) as ThreadsPerInch;
}

/** Geometry of a plain weave: opening w = 10⁴/n − d in µm, open share (w/(w+d))². Checks and suggests; the maker's sheet counts. @throws MeshError */
export function weaveOf(count: ThreadsPerCm, threadUm: number): { openingUm: number; openShare: number } {
  if (!(count > 0 && threadUm > 0 && Number.isFinite(count) && Number.isFinite(threadUm)))
    throw new MeshError(`A mesh has a count and a thread above 0, not ${count}/cm and ${threadUm} µm.`);
  const pitch = 10_000 / count;
  const openingUm = pitch - threadUm;
  if (openingUm <= 0)
    throw new MeshError(`Threads of ${threadUm} µm leave no opening at ${count}/cm. Is the count per inch?`);
  return { openingUm, openShare: (openingUm / pitch) ** 2 };
}

/** V_th in cm³/m²: open share × thickness of the fabric in µm. */
export function theoreticalVolume(openShare: number, thicknessUm: number): number {
  return openShare * thicknessUm;
}

/** What a mesh maker's sheet says. */
export interface MeshSheet {
  count: ThreadsPerCm;
  threadUm: number;
  openShare: number;
  thicknessUm: number;
  inkVolumeCm3PerM2: number;
}

/** Sheets round their figures, and fabric is pressed flat where threads cross. Common practice, no source. */
const PLAUSIBLE = 0.15;

/** What does not fit together on a sheet, to be asked and not refused: usually a count per inch entered per cm. */
export function doubtsOf(sheet: MeshSheet): readonly string[] {
  const doubts: string[] = [];
  const { openShare } = weaveOf(sheet.count, sheet.threadUm);
  if (isOff(sheet.openShare, openShare))
    doubts.push(
      `${percent(sheet.openShare)} open, where ${sheet.count}/cm of ${sheet.threadUm} µm gives ${percent(openShare)}. Is the count per cm?`,
    );
  const volume = theoreticalVolume(sheet.openShare, sheet.thicknessUm);
  if (isOff(sheet.inkVolumeCm3PerM2, volume))
    doubts.push(`${sheet.inkVolumeCm3PerM2} cm³/m², where open area and thickness give ${volume.toFixed(0)}.`);
  return doubts;
}

function isOff(stated: number, computed: number): boolean {
  return Math.abs(stated - computed) > PLAUSIBLE * computed;
}

function percent(share: number): string {
  return `${(share * 100).toFixed(0)} %`;
}
