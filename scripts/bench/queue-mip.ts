import type { QueueProblem } from '#domain/plan-queue.ts';

const BILLION = 1e9;
const grams = (mass: number) => mass / 1000;

/**
 * Core mathematics D as a mixed-integer program in CPLEX's LP text, masses in g. Per bucket i and batch b that can take
 * of it: z (opened), q (g); per bucket f (used up; else at least a sliver stays); per batch and component y, w as in A.
 */
export function queueMip({ batches, buckets }: QueueProblem, relaxed = false): string {
  const objective: string[] = [];
  const rows: string[] = [];
  const bounds: string[] = [];
  const binaries: string[] = [];
  const taken = buckets.map((): string[] => []);
  let sliver = 0;
  batches.forEach((batch, b) => {
    const least = grams(batch.batch.minimum);
    const greatest = grams(batch.batch.maximum);
    const share = (id: string) => (batch.target.get(id) ?? 0) / BILLION;
    const tau = (id: string) => (batch.tolerance.get(id) ?? 0) / BILLION;
    const minimum = grams(Math.max(1, Math.ceil(batch.minimumFromBucket / batch.readability)) * batch.readability);
    const kappa = grams(batch.worthOpening);
    sliver = Math.max(sliver, grams(batch.sliver));
    const m = `m${b}`;
    bounds.push(`${least} <= ${m} <= ${greatest}`);
    if (greatest > least) objective.push(`- ${m}`);
    const used: number[] = [];
    const components = new Set(batch.target.keys());
    buckets.forEach(({ id, usable, composition }, i) => {
      if (batch.allowed !== undefined && !batch.allowed.has(id)) return;
      const cap = Math.min(
        grams(usable),
        ...[...composition].map(([of, ppb]) => (greatest * (share(of) + tau(of)) * BILLION) / ppb),
      );
      if (cap <= 0 || (cap < minimum && cap < grams(usable))) return;
      used.push(i);
      for (const of of composition.keys()) components.add(of);
      const q = `q${i}_${b}`;
      objective.push(`+ ${q} - ${kappa} z${i}_${b}`);
      rows.push(`${q} - ${cap} z${i}_${b} <= 0`, `${q} - ${Math.min(minimum, grams(usable))} z${i}_${b} >= 0`);
      binaries.push(`z${i}_${b}`);
      taken[i]?.push(q);
    });
    if (used.length > 0) rows.push(`${used.map((i) => `+ z${i}_${b}`).join(' ')} <= ${batch.maximumBuckets}`);
    const fresh: string[] = [];
    [...components].forEach((of, j) => {
      const held = used.flatMap((i) => {
        const r = (buckets[i]?.composition.get(of) ?? 0) / BILLION;
        return r === 0 ? [] : [`+ ${r} q${i}_${b}`];
      });
      const y = `y${j}_${b}`;
      const sum = [...held, ...(share(of) > 0 ? [`+ ${y}`] : [])].join(' ');
      if (sum === '') return;
      rows.push(`${sum} - ${share(of) + tau(of)} ${m} <= 0`);
      const lower = Math.max(0, share(of) - tau(of));
      if (lower > 0) rows.push(`${sum} - ${lower} ${m} >= 0`);
      if (share(of) === 0) return;
      const enough = Math.min(grams(batch.minimumFresh), least * share(of));
      fresh.push(`+ ${y}`);
      if (enough === 0) return;
      rows.push(`${y} - ${enough} w${j}_${b} >= 0`, `${y} - ${greatest * (share(of) + tau(of))} w${j}_${b} <= 0`);
      binaries.push(`w${j}_${b}`);
    });
    rows.push(`${[...used.map((i) => `+ q${i}_${b}`), ...fresh].join(' ')} - ${m} = 0`);
  });
  taken.forEach((list, i) => {
    const usable = grams(buckets[i]?.usable ?? 0);
    if (list.length === 0) return;
    const sum = list.join(' + ');
    rows.push(`${sum} + ${Math.min(sliver, usable)} k${i} <= ${usable}`, `${sum} + ${usable} k${i} >= ${usable}`);
    if (buckets[i]?.mustUse) rows.push(`k${i} <= 0`);
    binaries.push(`k${i}`);
  });
  return [
    'Maximize',
    ` obj: ${objective.length === 0 ? '0 m0' : objective.join(' ')}`,
    'Subject To',
    ...rows.map((row, n) => ` c${n}: ${row}`),
    'Bounds',
    ...bounds.map((bound) => ` ${bound}`),
    ...(relaxed ? binaries.map((name) => ` ${name} <= 1`) : ['Binary', ...binaries.map((name) => ` ${name}`)]),
    'End',
  ].join('\n');
}
