import { useLiveQuery } from 'dexie-react-hooks';
import { dismissNote, readDeviceNotes } from '#offline/device-notes.ts';
import { describeLost } from './describe-device.ts';
import { DeviceNotice } from './DeviceNotice.tsx';
import { useStation } from './station-context.ts';

/** After a sign-in on a browser that had been cleared: what may be lost, on every page until somebody has read it. */
export function LossNote() {
  const { station } = useStation();
  const notes = useLiveQuery(() => readDeviceNotes(station), [station]);
  if (notes === undefined || notes.lost.length === 0) return null;
  const text = notes.lost.map((lost) => describeLost(lost, station.shop.locale)).join(' ');
  return (
    <DeviceNotice
      glyph="g-warn"
      text={text}
      act={{ label: 'I have read it', go: () => void dismissNote(station, 'lost') }}
    />
  );
}
