import { useEffect, useRef, useState } from 'react';
import type { Weighing } from '#contract/weighing.ts';
import { wasSavedHere } from '#offline/weighings.ts';

/** True from when another tab of this device went on with the batch, until this one does. */
export function useOtherTab(weighing: Weighing | null | undefined): boolean {
  const before = useRef<string>(undefined);
  const [wentOn, setWentOn] = useState(false);
  useEffect(() => {
    if (!weighing || before.current === weighing.updatedAt) return;
    if (before.current !== undefined) setWentOn(!wasSavedHere(weighing));
    before.current = weighing.updatedAt;
  }, [weighing]);
  return wentOn;
}
