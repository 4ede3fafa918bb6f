import { useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { useQueue } from '#components/ui/use-queue.ts';
import { CorrectSheet } from './CorrectSheet.tsx';
import { DeviceNote } from './DeviceNote.tsx';
import { DropSheet } from './DropSheet.tsx';
import { EntriesFile } from './EntriesFile.tsx';
import { Person } from './Person.tsx';
import { QueueList } from './QueueList.tsx';
import { SendNow } from './SendNow.tsx';
import { SoFar } from './SoFar.tsx';
import { Tray } from './Tray.tsx';
import { useEntryNames } from './use-entry-names.ts';
import { useTraySheet } from './use-tray-sheet.ts';

/** What waits on this device, what needs a decision, and the shift so far. */
export function ShiftPage() {
  return (
    <StationRoot area="shift">
      <Shift />
    </StationRoot>
  );
}

function Shift() {
  const queue = useQueue();
  const names = useEntryNames();
  const { sheet, open, close } = useTraySheet();
  const [note, setNote] = useState('');
  if (queue === undefined || names === undefined) return null;
  const entry = queue.rejected.find(({ opId }) => opId === sheet?.opId);
  if (sheet !== undefined && entry !== undefined) {
    const Sheet = sheet.act === 'correct' ? CorrectSheet : DropSheet;
    const done = (said: string) => {
      setNote(said);
      close();
    };
    return <Sheet entry={entry} names={names} onClose={close} onDone={done} />;
  }
  return (
    <>
      <Top title="Shift">
        <SyncChip />
      </Top>
      <div className="shift-cols stack gap-4">
        <div className="stack gap-4">
          <SendNow waiting={queue.waiting.length} decide={queue.rejected.length} />
          <Tray queue={queue} names={names} note={note} onDecide={open} />
          <DeviceNote />
        </div>
        <div className="stack gap-6">
          <QueueList title="Waits on this device" empty="Nothing waits." entries={queue.waiting} />
          <SoFar />
          <QueueList title="Sent today" empty="Nothing sent today." entries={queue.sentToday} />
          <EntriesFile count={queue.waiting.length + queue.rejected.length} />
          <Person waiting={queue.waiting.length} />
        </div>
      </div>
    </>
  );
}
