import { useLiveQuery } from 'dexie-react-hooks';
import { readQueue } from '#offline/shown.ts';
import { useStation } from './station-context.ts';

/** What waits, what was refused, what was sent today; undefined until the disk has answered. */
export function useQueue() {
  const { station } = useStation();
  return useLiveQuery(() => readQueue(station), [station]);
}
