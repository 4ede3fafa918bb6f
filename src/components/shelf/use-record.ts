import { useRef, useState } from 'react';
import { useStation } from '#components/ui/station-context.ts';
import type { OperationBody } from '#contract/operation-bodies.ts';
import { recordOperation } from '#offline/record-operation.ts';

export interface Recorder {
  record: (body: OperationBody, note: string) => Promise<void>;
  saving: boolean;
  problem: string | undefined;
}

/** Puts one act into the outbox, once however often the key is hit; `onDone` gets the note to show. */
export function useRecord(onDone: (note: string) => void): Recorder {
  const { station } = useStation();
  const started = useRef(false);
  const [saving, setSaving] = useState(false);
  const [problem, setProblem] = useState<string>();
  async function record(body: OperationBody, note: string) {
    if (started.current) return;
    started.current = true;
    setSaving(true);
    setProblem(undefined);
    try {
      await recordOperation(station, body);
      navigator.vibrate?.(60);
      onDone(note);
    } catch (error) {
      started.current = false;
      setSaving(false);
      setProblem(error instanceof Error ? error.message : 'Not saved. Try again.');
    }
  }
  return { record, saving, problem };
}
