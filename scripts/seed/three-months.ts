import { compositionFromParts } from '#domain/composition.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { History } from './histories.ts';
import type { Writer } from './operation-writer.ts';
import { type SeedContext, type SeedFormula, daysBefore } from './seed-context.ts';

const LEGACY = 15;

function requireFormula(context: SeedContext, code: string): SeedFormula {
  const formula = context.formulas.find((entry) => entry.code === code);
  if (formula === undefined) throw new Error(`The scenario needs ${code}.`);
  return formula;
}

/** `count` tubs in all: legacy ones first, then batches, oldest first; the two that the story needs come last. */
export function liveThroughThreeMonths(context: SeedContext, history: History, writer: Writer, count: number): void {
  const { random } = context;
  for (let n = 0; n < LEGACY; n++) adoptLegacyTub(context, history, writer, n);
  const batches = count - LEGACY;
  for (let n = 0; n < batches - 2; n++) {
    const daysAgo = 88 - Math.floor((n * 86) / batches);
    const older = history.tubs.find(
      (tub) => tub.state === 'shelf' && tub.balanceMg > 150_000 && tub.balanceMg < 600_000 && !tub.blended,
    );
    if (n % 9 === 8 && older !== undefined) {
      history.mix(older.formula, random.int(16, 24) * 50_000, daysAgo, older);
      continue;
    }
    const tub = history.mix(random.pick(context.formulas.slice(0, 120)), random.int(8, 60) * 50_000, daysAgo);
    if (random.next() < 0.15) continue;
    history.issue(tub, daysAgo);
    if (random.next() < 0.08) continue;
    const left = random.next() < 0.12 ? 0 : Math.floor((tub.balanceMg * random.int(12, 55)) / 10_000) * 100;
    history.giveBack(
      tub,
      left,
      Math.max(1, daysAgo - 1),
      random.pick(['clean', 'clean', 'clean', 'clean', 'lint', 'dirty'] as const),
    );
  }
  const sky = history.mix(requireFormula(context, 'QF-0302'), 900_000, 9);
  history.issue(sky, 9);
  history.giveBack(sky, 412_000, 8, 'clean');
  const dusk = history.mix(requireFormula(context, 'QF-0317'), 1_200_000, 4);
  history.issue(dusk, 4);
  history.giveBack(dusk, 236_500, 3, 'clean');
}

/** From before the books: every third one of unknown content. */
function adoptLegacyTub(context: SeedContext, history: History, writer: Writer, n: number): void {
  const { random } = context;
  const formula = context.formulas[n * 7] as SeedFormula;
  const container = random.pick(context.containers.slice(1, 4));
  const shares = n % 3 === 0 ? new Map() : compositionFromParts(formula.parts);
  const body = {
    bucketId: random.uuid(),
    code: history.nextCode(),
    name: n % 3 === 0 ? `Unlabelled tub ${n + 1}` : `${formula.name}, old label`,
    familyId: formula.familyId,
    containerId: container.id,
    grossMg: (container.tareMg + random.int(90, 420) * 1000) as Milligrams,
    tareMg: container.tareMg as Milligrams,
    locationId: random.pick(context.locations),
    composition: [...shares].map(([componentId, ppb]) => ({ componentId, ppb: ppb as number })),
    lab: { l: random.int(30, 80), a: random.int(-40, 50), b: random.int(-40, 60) },
  };
  writer.write(
    { type: 'bucket-adopted', body },
    daysBefore(context.today, 90),
    context.people.get('manager') as string,
  );
}
