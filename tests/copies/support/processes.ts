import fs from 'node:fs';

/** Process ids of the children that a process has now, as /proc tells them. */
export function childrenOf(parent: number): number[] {
  const all = fs.readdirSync('/proc').map(Number).filter(Number.isInteger);
  return all.filter((pid) => readStat(pid)?.parent === parent);
}

/** Neither ended nor waiting for its parent to notice. */
export function isRunning(pid: number): boolean {
  const stat = readStat(pid);
  return stat !== undefined && stat.state !== 'Z';
}

function readStat(pid: number): { state: string; parent: number } | undefined {
  try {
    // The name in brackets may hold spaces; what follows the last bracket is state and parent.
    const text = fs.readFileSync(`/proc/${pid}/stat`, 'utf8');
    const [state = '', parent] = text.slice(text.lastIndexOf(')') + 2).split(' ');
    return { state, parent: Number(parent) };
  } catch {
    return undefined;
  }
}
