import type { Simulated } from './simulate.ts';
import { noneYet } from './virtual-network.ts';

/** Counts of many shifts; every figure that is printed was counted. */
export class SimulationTotal {
  readonly broken: string[] = [];
  readonly faults = noneYet();
  seeds = 0;
  operations = 0;
  unsaved = 0;
  kills = 0;

  add(seed: number, { saved, unsaved, kills, faults }: Simulated, broken: readonly string[]): void {
    this.seeds += 1;
    this.operations += saved.size;
    this.unsaved += unsaved;
    this.kills += kills;
    for (const name of Object.keys(faults) as (keyof typeof faults)[]) this.faults[name] += faults[name];
    this.broken.push(...broken.map((what) => `seed ${seed}: ${what}`));
  }

  summary(): string {
    const lost = this.broken.filter((what) => what.endsWith('is in 0 places')).length;
    const doubled = this.broken.filter((what) => what.includes(': once: ')).length - lost;
    const faults = Object.entries(this.faults).map(([name, times]) => `${name} ${times}`);
    return [
      `simulation: ${this.seeds} seeds, ${this.operations} operations saved, ${this.unsaved} told as not saved,`,
      `${this.kills} tabs killed, ${lost} lost, ${doubled} doubled, ${this.broken.length} broken invariants`,
      `(faults: ${faults.join(', ')})`,
    ].join(' ');
  }
}
