import type { RepairInput } from '#domain/repair-overshoot.ts';

/**
 * Core mathematics C as a linear program in CPLEX's LP text, masses in g: the least final batch m, y fresh ink of each
 * component of the formula. Infeasible where no fresh ink repairs the pot.
 */
export function repairLp({ target, planned, contents, tolerance }: RepairInput): string {
  const held = new Map<string, number>();
  for (const { composition, mass } of contents) {
    for (const [id, share] of composition) held.set(id, (held.get(id) ?? 0) + (mass / 1000) * (share / 1e9));
  }
  const pot = contents.reduce((sum, { mass }) => sum + mass, 0) / 1000;
  const rows: string[] = [];
  const bounds = [`m >= ${Math.max(pot, planned / 1000)}`];
  const fresh: string[] = [];
  [...new Set([...target.keys(), ...held.keys()])].forEach((id, n) => {
    const [share, off] = [(target.get(id) ?? 0) / 1e9, (tolerance.get(id) ?? 0) / 1e9];
    const lies = held.get(id) ?? 0;
    rows.push(`y${n} - ${share + off} m <= ${-lies}`, `y${n} - ${Math.max(0, share - off)} m >= ${-lies}`);
    if (share === 0) bounds.push(`y${n} = 0`);
    fresh.push(`+ y${n}`);
  });
  rows.push(`${fresh.join(' ')} - m = ${-pot}`);
  return [
    'Minimize',
    ' obj: m',
    'Subject To',
    ...rows.map((row, n) => ` c${n}: ${row}`),
    'Bounds',
    ...bounds,
    'End',
  ].join('\n');
}
