import { useRef, useState } from 'react';

export interface Decision {
  decide: (act: () => Promise<unknown>) => Promise<void>;
  saving: boolean;
  problem: string | undefined;
}

/** Carries out one act, once however often the key is hit; says why when it did not work. */
export function useDecision(onDone: () => void): Decision {
  const started = useRef(false);
  const [saving, setSaving] = useState(false);
  const [problem, setProblem] = useState<string>();
  async function decide(act: () => Promise<unknown>) {
    if (started.current) return;
    started.current = true;
    setSaving(true);
    setProblem(undefined);
    try {
      await act();
      navigator.vibrate?.(60);
      onDone();
    } catch (error) {
      setProblem(error instanceof Error ? error.message : 'Not saved. Try again.');
    }
    started.current = false;
    setSaving(false);
  }
  return { decide, saving, problem };
}
