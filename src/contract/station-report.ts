import * as z from 'zod/mini';
import { instant, uuid } from './identifiers.ts';

/** What a station says of itself when it fetches. */
export interface StationReport {
  /** Entries that wait to be sent. */
  waiting: number;
  /** The last number that was given to an entry. */
  recorded: number;
  /** What its clock is behind the server's, ms; negative: ahead. */
  offsetMs: number;
}

const REPORT = /^(\d{1,7}):(\d{1,10}):(-?\d{1,14})$/;

export function writeReport({ waiting, recorded, offsetMs }: StationReport): string {
  return `${waiting}:${recorded}:${Math.round(offsetMs)}`;
}

/** `waiting:recorded:offset` of the query; undefined when it is missing or something else. */
export function readReport(text: string | null): StationReport | undefined {
  const [, waiting, recorded, offset] = REPORT.exec(text ?? '') ?? [];
  if (waiting === undefined || recorded === undefined || offset === undefined) return undefined;
  return { waiting: Number(waiting), recorded: Number(recorded), offsetMs: Number(offset) };
}

/** Of an install whose databases the browser cleared: what had come, and what had not. */
export const lostInstall = z.object({
  installId: uuid,
  /** The last entry that reached the server; 0: none did. */
  sentUpTo: z.int(),
  /** Numbers that the device had given and that never came, the first hundred. */
  missing: z.array(z.int()),
  missingCount: z.int(),
  /** What is recorded after it is known to nobody. */
  lastContact: z.nullable(instant),
});
export type LostInstall = z.infer<typeof lostInstall>;
