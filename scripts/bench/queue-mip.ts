import type { QueueProblem } from '#domain/plan-queue.ts';

type Batch = QueueProblem['batches'][number];
type Bucket = QueueProblem['buckets'][number];

/** mg in a unit of the program: kilograms, which the general solver takes to best. */
export const PROGRAM_UNIT = 1e6;
const BILLION = 1e9;
const inUnits = (mass: number) => Number((mass / PROGRAM_UNIT).toPrecision(12));

interface Program {
  objective: string[];
  rows: string[];
  bounds: string[];
  binaries: string[];
}

/**
 * Core mathematics D as a mixed-integer program in CPLEX's LP text. Per bucket i and batch b that can take of it: z
 * (opened), q (mass); per batch m (its mass); per batch and component y (fresh), w (some fresh), as in A; per bucket k
 * (something stays of it: at least a sliver). Pairs of which nothing fits are left out.
 */
export function queueMip({ batches, buckets }: QueueProblem): string {
  const program: Program = { objective: [], rows: [], bounds: [], binaries: [] };
  const taken = buckets.map((): string[] => []);
  batches.forEach((batch, b) => addBatch(program, batch, b, buckets, taken));
  const sliver = batches.reduce((most, batch) => Math.max(most, batch.sliver), 0);
  buckets.forEach((bucket, i) => addBucket(program, bucket, i, taken[i] ?? [], sliver));
  return [
    'Maximize',
    ` obj: ${program.objective.length === 0 ? '0 m0' : program.objective.join(' ')}`,
    'Subject To',
    ...program.rows.map((row, n) => ` c${n}: ${row}`),
    'Bounds',
    ...program.bounds.map((bound) => ` ${bound}`),
    'Binary',
    ` ${program.binaries.join(' ')}`,
    'End',
  ].join('\n');
}

function addBatch(program: Program, batch: Batch, b: number, buckets: readonly Bucket[], taken: string[][]): void {
  const { minimum: least, maximum: greatest } = batch.batch;
  program.bounds.push(`${inUnits(least)} <= m${b} <= ${inUnits(greatest)}`);
  if (greatest > least) program.objective.push(`- m${b}`);
  const used = buckets.flatMap((bucket, i) => (addPair(program, batch, b, bucket, i) ? [i] : []));
  for (const i of used) taken[i]?.push(`q${i}_${b}`);
  if (used.length > batch.maximumBuckets)
    program.rows.push(`${used.map((i) => `+ z${i}_${b}`).join(' ')} <= ${batch.maximumBuckets}`);
  const components = new Set([
    ...batch.target.keys(),
    ...used.flatMap((i) => [...(buckets[i] as Bucket).composition.keys()]),
  ]);
  [...components].forEach((id, j) => {
    const held = used.flatMap((i) => {
      const ppb = buckets[i]?.composition.get(id);
      return ppb === undefined ? [] : [`+ ${ppb / BILLION} q${i}_${b}`];
    });
    addComponent(program, batch, id, [b, j], held);
  });
  const fresh = [...batch.target.keys()].map((_, j) => `+ y${j}_${b}`);
  program.rows.push(`${[...used.map((i) => `+ q${i}_${b}`), ...fresh].join(' ')} - m${b} = 0`);
}

/** False when nothing of the bucket may go into the batch. */
function addPair(program: Program, batch: Batch, b: number, { id, usable, composition }: Bucket, i: number): boolean {
  if (batch.allowed?.has(id) === false) return false;
  const room = (of: string) => (batch.target.get(of) ?? 0) + (batch.tolerance.get(of) ?? 0);
  const cap = Math.min(usable, ...[...composition].map(([of, ppb]) => (batch.batch.maximum * room(of)) / ppb));
  const minimum = Math.min(usable, Math.max(batch.minimumFromBucket, batch.readability));
  if (cap <= 0 || cap < minimum) return false;
  const [q, z] = [`q${i}_${b}`, `z${i}_${b}`];
  program.objective.push(batch.worthOpening === 0 ? `+ ${q}` : `+ ${q} - ${inUnits(batch.worthOpening)} ${z}`);
  program.rows.push(`${q} - ${inUnits(cap)} ${z} <= 0`, `${q} - ${inUnits(minimum)} ${z} >= 0`);
  program.binaries.push(z);
  return true;
}

function addComponent({ rows, binaries }: Program, batch: Batch, id: string, [b, j]: [number, number], held: string[]) {
  const share = batch.target.get(id) ?? 0;
  const tau = batch.tolerance.get(id) ?? 0;
  const y = `y${j}_${b}`;
  const sum = [...held, ...(share > 0 ? [`+ ${y}`] : [])].join(' ');
  const edge = (ppb: number) => `${ppb / BILLION} m${b}`;
  if (tau === 0) rows.push(`${sum} - ${edge(share)} = 0`);
  else rows.push(`${sum} - ${edge(share + tau)} <= 0`, `${sum} - ${edge(Math.max(0, share - tau))} >= 0`);
  const enough = Math.min(batch.minimumFresh, (batch.batch.minimum * share) / BILLION);
  if (enough === 0) return;
  const most = (batch.batch.maximum * (share + tau)) / BILLION;
  rows.push(`${y} - ${inUnits(enough)} w${j}_${b} >= 0`, `${y} - ${inUnits(most)} w${j}_${b} <= 0`);
  binaries.push(`w${j}_${b}`);
}

function addBucket(
  { rows, binaries }: Program,
  { usable, mustUse }: Bucket,
  i: number,
  taken: string[],
  sliver: number,
) {
  if (taken.length === 0) return void (mustUse && usable > 0 && rows.push('m0 <= 0'));
  const sum = taken.join(' + ');
  const all = inUnits(usable);
  rows.push(`${sum} + ${inUnits(Math.min(sliver, usable))} k${i} <= ${all}`, `${sum} + ${all} k${i} >= ${all}`);
  if (mustUse) rows.push(`k${i} <= 0`);
  binaries.push(`k${i}`);
}
