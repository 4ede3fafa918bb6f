import fs from 'node:fs';
import pg from 'pg';

/** Linux counts in hundredths of a second (USER_HZ). */
const TICKS = 100;

export interface Used {
  server: number;
  postgres: number;
  stations: number;
}

/**
 * Reads how many seconds of processor time the server, PostgreSQL and this process have used: on a machine that others use
 * too it says what a wall clock cannot.
 */
export async function cpuReader(serverPid: number, databaseUrl: string): Promise<() => Used> {
  const client = new pg.Client({ connectionString: databaseUrl });
  await client.connect();
  const { rows } = await client.query<{ pid: number }>('select pg_backend_pid() as pid');
  const postmaster = readStat(rows[0]?.pid ?? 0)?.parent ?? 0;
  await client.end();
  return () => ({
    server: readStat(serverPid)?.own ?? 0,
    postgres: familyOf(postmaster),
    stations: process.cpuUsage().user / 1e6 + process.cpuUsage().system / 1e6,
  });
}

/** A sentence of what was used between two readings, and of the least time that two idle cores need for it. */
export function sayUsed(before: Used, after: Used): string {
  const [server, postgres, stations] = (['server', 'postgres', 'stations'] as const).map(
    (who) => after[who] - before[who],
  ) as [number, number, number];
  const least = Math.max(server, postgres, stations, (server + postgres + stations) / 2);
  return `  processor: server ${server.toFixed(1)} s, PostgreSQL ${postgres.toFixed(1)} s, the stations of this bench ${stations.toFixed(1)} s; two idle cores need at least ${least.toFixed(1)} s`;
}

/** The postmaster, its children of now, and those that have ended. */
function familyOf(postmaster: number): number {
  const children = fs.readdirSync('/proc').map(Number).filter(Number.isInteger);
  const alive = children.flatMap((pid) => {
    const stat = readStat(pid);
    return stat?.parent === postmaster ? [stat.own] : [];
  });
  const own = readStat(postmaster);
  return (own?.own ?? 0) + (own?.ended ?? 0) + alive.reduce((sum, one) => sum + one, 0);
}

function readStat(pid: number): { parent: number; own: number; ended: number } | undefined {
  try {
    // proc(5): after the name in brackets come state, ppid and, as 12th to 15th, utime, stime, cutime, cstime.
    const text = fs.readFileSync(`/proc/${pid}/stat`, 'utf8');
    const fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
    const [user = 0, system = 0, endedUser = 0, endedSystem = 0] = fields.slice(11, 15).map(Number);
    return { parent: Number(fields[1]), own: (user + system) / TICKS, ended: (endedUser + endedSystem) / TICKS };
  } catch {
    return undefined;
  }
}
