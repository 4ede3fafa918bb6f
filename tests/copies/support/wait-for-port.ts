import type { ChildProcess } from 'node:child_process';
import net from 'node:net';
import { setTimeout as sleep } from 'node:timers/promises';

/** Until something on loopback listens there. @throws Error when the process that should has ended instead */
export async function waitForPort(port: number, process: ChildProcess): Promise<void> {
  while (!(await answers(port))) {
    if (process.exitCode !== null || process.signalCode !== null)
      throw new Error(`${process.spawnfile} ended before it listened: ${process.exitCode ?? process.signalCode}`);
    await sleep(50);
  }
}

function answers(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = net.connect(port, '127.0.0.1');
    socket.once('connect', () => resolve(socket.destroy() !== undefined));
    socket.once('error', () => resolve(false));
  });
}
