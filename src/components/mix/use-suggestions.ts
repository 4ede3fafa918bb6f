import { useEffect, useState } from 'react';
import type { PartsPerBillion } from '#domain/mass.ts';
import { solveFoldIn } from '#workers/fold-in-client.ts';
import type { ShelfFacts } from './fold-in-problem.ts';
import { type Suggestions, suggestPlans } from './suggestions.ts';

export type SuggestionState =
  | { phase: 'waiting' }
  | { phase: 'solving' }
  | { phase: 'done'; batchMg: number; found: Suggestions }
  | { phase: 'failed'; problem: string };

const TYPING_PAUSE_MS = 250;

/** Solves in the worker after the typing has paused; a new question cancels the old one. */
export function useSuggestions(
  facts: ShelfFacts | undefined,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): SuggestionState {
  const [state, setState] = useState<SuggestionState>({ phase: 'waiting' });
  useEffect(() => {
    if (facts === undefined) {
      setState({ phase: 'waiting' });
      return;
    }
    const cancel = new AbortController();
    setState({ phase: 'solving' });
    const timer = setTimeout(() => {
      suggestPlans(facts, tolerance, (problem) => solveFoldIn(problem, undefined, cancel.signal)).then(
        (found) => {
          if (!cancel.signal.aborted) setState({ phase: 'done', batchMg: facts.batch, found });
        },
        (error: unknown) => {
          if (cancel.signal.aborted) return;
          setState({ phase: 'failed', problem: error instanceof Error ? error.message : 'The search stopped.' });
        },
      );
    }, TYPING_PAUSE_MS);
    return () => {
      clearTimeout(timer);
      cancel.abort();
    };
  }, [facts, tolerance]);
  return state;
}
