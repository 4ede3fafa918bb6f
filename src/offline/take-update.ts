/** What became of the wish to take a waiting version. */
export type UpdateAnswer = 'taken' | 'weighing-open' | 'sync-runs';

export interface UpdateChecks {
  weighingIsOpen: () => Promise<boolean>;
  /** Runs when no tab of this browser is syncing, and keeps them from it meanwhile; else undefined. */
  alone: <T>(run: () => Promise<T>) => Promise<T | undefined>;
}

/** Takes the waiting version; refuses while a batch is open or a sync runs, so that neither is ever interrupted. */
export async function takeUpdate(take: () => Promise<void>, checks: UpdateChecks): Promise<UpdateAnswer> {
  const answer = await checks.alone(async (): Promise<UpdateAnswer> => {
    if (await checks.weighingIsOpen()) return 'weighing-open';
    await take();
    return 'taken';
  });
  return answer ?? 'sync-runs';
}
