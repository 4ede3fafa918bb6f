import { useMemo } from 'react';
import type { ShelfFacts } from './fold-in-problem.ts';
import type { Amount } from './read-amount.ts';
import type { MixFacts } from './use-mix-facts.ts';

/** What the search needs, once there is a mass that can be weighed. */
export function useShelfFacts(
  facts: MixFacts,
  amount: Amount,
  refused: ReadonlySet<string>,
  mustUse: string | null,
): ShelfFacts | undefined {
  return useMemo(() => {
    if (amount.state !== 'ok') return undefined;
    return {
      target: facts.target,
      familyId: facts.revision.familyId,
      batch: amount.mass,
      scale: amount.scale,
      jobId: facts.job?.id ?? null,
      maxCureC: facts.job?.maxCureC ?? null,
      compliance: facts.job?.compliance ?? [],
      date: new Date().toISOString().slice(0, 10),
      buckets: facts.buckets,
      containers: facts.containers,
      rules: facts.rules,
      settings: facts.shop.settings,
      refused,
      mustUse,
    };
  }, [facts, amount, refused, mustUse]);
}
