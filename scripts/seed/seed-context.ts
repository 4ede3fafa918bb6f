import type { Row } from '#contract/rows.ts';
import type { ShopTransaction } from '#server/db/in-shop.ts';
import type { Random } from './random.ts';

/** What the steps of filling a shop hand on; ids by the names that the scenario uses. */
export interface SeedContext {
  trx: ShopTransaction;
  shopId: string;
  random: Random;
  /** Midnight of the day that counts as today. */
  today: Date;
  people: Map<string, string>;
  families: Map<string, string>;
  inks: Map<string, string>;
  lots: Map<string, string[]>;
  containers: Row<'containers'>[];
  locations: string[];
  scaleId: string;
  formulas: SeedFormula[];
  jobs: string[];
}

export interface SeedFormula {
  id: string;
  code: string;
  name: string;
  revision: number;
  familyId: string;
  parts: { componentId: string; parts: string }[];
}

export const DAY_MS = 86_400_000;

export function daysBefore(today: Date, days: number): Date {
  return new Date(today.getTime() - days * DAY_MS);
}
