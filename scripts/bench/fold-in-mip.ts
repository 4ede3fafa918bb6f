import type { FoldInProblem } from '#domain/fold-in.ts';

const BILLION = 1e9;
const grams = (mass: number) => mass / 1000;

/**
 * Core mathematics A as a mixed-integer program in CPLEX's LP text, masses in g: what a general solver is asked.
 * Per bucket e (emptied), p (in part), q (g in part); per component y (fresh g), w (some fresh); m (the batch, in a range).
 */
export function foldInMip(problem: FoldInProblem): string {
  const { batch, buckets } = problem;
  const ranged = batch.maximum > batch.minimum;
  const components = [
    ...new Set([problem.target, ...buckets.map((b) => b.composition)].flatMap((of) => [...of.keys()])),
  ];
  const share = (id: string) => (problem.target.get(id) ?? 0) / BILLION;
  const tau = (id: string) => (problem.tolerance.get(id) ?? 0) / BILLION;
  const minimum = grams(Math.max(1, Math.ceil(problem.minimumFromBucket / problem.readability)) * problem.readability);
  const [least, greatest] = [grams(batch.minimum), grams(batch.maximum)];
  const kappa = grams(problem.worthOpening);
  const objective: string[] = [];
  const rows: string[] = [];
  const bounds: string[] = [`${least} <= m <= ${greatest}`];
  const binaries: string[] = [];
  const total = buckets.flatMap(({ usable }, i) => [`+ ${grams(usable)} e${i}`, `+ q${i}`]);
  buckets.forEach(({ usable, composition, mustUse }, i) => {
    const cap = Math.min(
      greatest,
      ...[...composition].map(([id, ppb]) => (greatest * (share(id) + tau(id)) * BILLION) / ppb),
    );
    const most = Math.min(cap, grams(usable - problem.sliver));
    objective.push(`+ ${grams(usable) - kappa} e${i}`, `+ q${i}`, `- ${kappa} p${i}`);
    rows.push(`q${i} - ${Math.max(0, most)} p${i} <= 0`, `q${i} - ${minimum} p${i} >= 0`);
    rows.push(`e${i} + p${i} <= 1`);
    if (mustUse) rows.push(`e${i} >= 1`);
    if (most < minimum) rows.push(`p${i} <= 0`);
    if (grams(usable) > cap || usable === 0) rows.push(`e${i} <= 0`);
    binaries.push(`e${i}`, `p${i}`);
  });
  if (ranged) objective.push('- m');
  if (buckets.length > 0)
    rows.push(`${buckets.map((_, i) => `+ e${i} + p${i}`).join(' ')} <= ${problem.maximumBuckets}`);
  components.forEach((id, j) => {
    const held = buckets.flatMap(({ usable, composition }, i) => {
      const r = (composition.get(id) ?? 0) / BILLION;
      return r === 0 ? [] : [`+ ${grams(usable) * r} e${i}`, `+ ${r} q${i}`];
    });
    const sum = [...held, `+ y${j}`].join(' ');
    rows.push(`${sum} - ${share(id) + tau(id)} m <= 0`, `${sum} - ${Math.max(0, share(id) - tau(id))} m >= 0`);
    if (share(id) === 0) return void bounds.push(`y${j} = 0`);
    rows.push(`y${j} - ${greatest * (share(id) + tau(id))} w${j} <= 0`);
    const minimumFresh = grams(problem.minimumFresh);
    if (ranged && minimumFresh > least * share(id)) {
      // Either of the two that the least fresh weight is the lesser of, chosen by k.
      rows.push(`y${j} - ${minimumFresh} w${j} + ${minimumFresh} k${j} >= 0`);
      const most = greatest * share(id);
      rows.push(`y${j} - ${share(id)} m - ${most} k${j} - ${most} w${j} >= ${-2 * most}`);
      binaries.push(`k${j}`);
    } else rows.push(`y${j} - ${Math.min(minimumFresh, least * share(id))} w${j} >= 0`);
    binaries.push(`w${j}`);
  });
  rows.push(`${[...total, ...components.map((_, j) => `+ y${j}`)].join(' ')} - m = 0`);
  return [
    'Maximize',
    ` obj: ${objective.length === 0 ? '0 m' : objective.join(' ')}`,
    'Subject To',
    ...rows.map((row, n) => ` c${n}: ${row}`),
    'Bounds',
    ...bounds.map((bound) => ` ${bound}`),
    'Binary',
    ` ${binaries.join(' ')}`,
    'End',
  ].join('\n');
}
