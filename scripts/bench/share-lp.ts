import type { Composition } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';

/**
 * Core mathematics B as a linear program in CPLEX's LP text: the largest part s of a batch of 1 that a bucket can be,
 * y fresh ink of each component of the formula.
 */
export function shareLp(
  composition: Composition,
  target: Composition,
  tolerance: ReadonlyMap<string, PartsPerBillion>,
): string {
  const rows: string[] = [];
  const bounds = ['s <= 1'];
  const all = ['s'];
  [...new Set([...target.keys(), ...composition.keys()])].forEach((id, n) => {
    const [share, off] = [(target.get(id) ?? 0) / 1e9, (tolerance.get(id) ?? 0) / 1e9];
    const part = `${(composition.get(id) ?? 0) / 1e9} s + y${n}`;
    rows.push(`${part} <= ${share + off}`, `${part} >= ${Math.max(0, share - off)}`);
    if (share === 0) bounds.push(`y${n} = 0`);
    all.push(`y${n}`);
  });
  rows.push(`${all.join(' + ')} = 1`);
  return [
    'Maximize',
    ' obj: s',
    'Subject To',
    ...rows.map((row, n) => ` c${n}: ${row}`),
    'Bounds',
    ...bounds,
    'End',
  ].join('\n');
}
