import { writeReport } from '#contract/station-report.ts';
import { findKey } from './outbox-keys.ts';
import type { Station } from './station.ts';

/** What the server remembers of this outbox, for the day on which the browser clears it. */
export async function reportStation({ outbox }: Station): Promise<string> {
  const waiting = await outbox.ops.where('status').equals('waiting').count();
  const recorded = (await findKey(outbox, 'deviceSeq')) ?? 0;
  const offsetMs = (await findKey(outbox, 'clock'))?.offsetMs ?? 0;
  return writeReport({ waiting, recorded, offsetMs });
}
