import { useRef, useState } from 'react';
import { useStation } from '#components/ui/station-context.ts';
import { recordOperation } from '#offline/record-operation.ts';
import type { ShiftReport } from './shift-summary-report.ts';

/** Puts a summary into the outbox, once however often the key is hit. */
export function useHandIn(): {
  handIn: (report: ShiftReport) => Promise<void>;
  saving: boolean;
  problem: string | undefined;
} {
  const { station } = useStation();
  const started = useRef(false);
  const [saving, setSaving] = useState(false);
  const [problem, setProblem] = useState<string>();
  async function handIn(report: ShiftReport) {
    if (started.current) return;
    started.current = true;
    setSaving(true);
    setProblem(undefined);
    try {
      await recordOperation(station, report);
      navigator.vibrate?.(60);
    } catch (error) {
      setProblem(error instanceof Error ? error.message : 'Not saved. Try again.');
    }
    started.current = false;
    setSaving(false);
  }
  return { handIn, saving, problem };
}
