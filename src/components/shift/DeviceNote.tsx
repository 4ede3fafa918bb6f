import { useEffect, useState } from 'react';
import { useLiveQuery } from 'dexie-react-hooks';
import { describeJump } from '#components/ui/describe-device.ts';
import { DeviceNotice } from '#components/ui/DeviceNotice.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { askToKeep, dismissNote, isKept, readDeviceNotes } from '#offline/device-notes.ts';

/** What the technician should know of this device: whether it keeps what waits, its clock, its room. */
export function DeviceNote() {
  const { station } = useStation();
  const notes = useLiveQuery(() => readDeviceNotes(station), [station]);
  const [kept, setKept] = useState<boolean>();
  useEffect(() => void isKept().then(setKept), []);
  if (notes === undefined) return null;
  return (
    <>
      {notes.clockJump === undefined ? null : (
        <DeviceNotice
          glyph="g-clock"
          text={describeJump(notes.clockJump, station.shop.locale)}
          act={{ label: 'I have read it', go: () => void dismissNote(station, 'clockJump') }}
        />
      )}
      {notes.wasFull ? (
        <DeviceNotice
          glyph="g-device"
          text="This device was full: part of the shop was cleared and comes back with the next signal. Delete something else on it."
        />
      ) : null}
      {kept === false ? (
        <DeviceNotice
          glyph="g-device"
          text="This device may clear what it keeps when it runs out of room. Send before you leave, and install Halfpail from the browser's menu."
          act={{ label: 'Ask to keep it', go: () => void askToKeep().then(setKept) }}
        />
      ) : null}
      {kept === true ? <p className="ink2 g g-ok">This device keeps what waits until it is sent.</p> : null}
    </>
  );
}
