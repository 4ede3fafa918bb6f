import { InkNeedError, type Range } from './ink-range.ts';
import type { Milligrams } from './mass.ts';

export { fitTransfer, type InkRun, type Spread } from './fit-transfer.ts';
export { InkNeedError, type Range };

export interface InkNeedInput {
  areaMm2: number;
  /** Share of the area that is printed, 0 to 1. */
  coverage: number;
  /** V_th, the theoretical ink volume of the mesh, from its maker's sheet. */
  inkVolumeCm3PerM2: number;
  /** Share of V_th that comes through, as weighed; a default is a guess. */
  transfer: Range;
  /** 1 for one stroke; a double stroke or print-flash-print as the shop measured it. */
  strokeFactor: number;
  densityGPerCm3: number;
  prints: number;
  /** Prints that are spoiled, as a share of the good ones: 0.05 for 5 %. */
  spoilage: number;
  setUpPrints: number;
  screens: number;
  /** mg that stay in each screen and on its tools for good. */
  screenLoss: Milligrams;
  /** mg that lie in each screen while it prints, and come back. */
  screenCharge: Milligrams;
}

/**
 * Ink for a run (core mathematics G), in mg: per print; what it uses; what must be ready; what is expected back.
 * A print takes area × coverage × V_th × transfer × stroke factor × density. Rounded to whole mg at the end only.
 * @throws InkNeedError
 */
export function inkNeed(input: InkNeedInput): Record<'perPrint' | 'uses' | 'ready' | 'expectBack', Range<Milligrams>> {
  requireRun(input);
  const perPrint = (transfer: number) => {
    const cm3 = (input.areaMm2 / 100) * input.coverage * (input.inkVolumeCm3PerM2 / 10_000);
    return cm3 * transfer * input.strokeFactor * input.densityGPerCm3 * 1000;
  };
  const prints = input.prints * (1 + input.spoilage) + input.setUpPrints;
  const lost = input.screens * input.screenLoss;
  const back = input.screens * input.screenCharge;
  const over = (mass: (transfer: number) => number): Range<Milligrams> => ({
    low: whole(mass(input.transfer.low)),
    likely: whole(mass(input.transfer.likely)),
    high: whole(mass(input.transfer.high)),
  });
  return {
    perPrint: over(perPrint),
    uses: over((transfer) => perPrint(transfer) * prints + lost),
    ready: over((transfer) => perPrint(transfer) * prints + lost + back),
    expectBack: over(() => back),
  };
}

function requireRun(input: InkNeedInput): void {
  const positive = ['areaMm2', 'inkVolumeCm3PerM2', 'strokeFactor', 'densityGPerCm3'] as const;
  for (const key of positive) require(input[key] > 0, `${key} must be above 0, not ${input[key]}.`);
  require(input.coverage >= 0 && input.coverage <= 1, `The coverage is a share from 0 to 1, not ${input.coverage}.`);
  require(input.spoilage >= 0, `The spoilage is a share from 0 up, not ${input.spoilage}.`);
  for (const key of ['prints', 'setUpPrints', 'screens', 'screenLoss', 'screenCharge'] as const) {
    const isWhole = Number.isSafeInteger(input[key]) && input[key] >= 0;
    require(isWhole, `${key} must be a whole number from 0 up, not ${input[key]}.`);
  }
  const { low, likely, high } = input.transfer;
  require(0 <= low &&
    low <= likely &&
    likely <= high, `The transfer goes from low over likely to high, not ${low}, ${likely}, ${high}.`);
}

/** A comparison with NaN does not hold. */
function require(holds: boolean, problem: string): void {
  if (!holds) throw new InkNeedError(problem);
}

function whole(mass: number): Milligrams {
  const rounded = Math.round(mass);
  if (!Number.isSafeInteger(rounded))
    throw new InkNeedError('That is more ink than can be counted. Check the figures.');
  return rounded as Milligrams;
}
