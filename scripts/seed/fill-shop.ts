import type { Role } from '#contract/roles.ts';
import { FAMILIES, INKS, RULES } from './inks.ts';
import { type SeedContext, DAY_MS } from './seed-context.ts';

/** Changes of the demo shop's documents all carry this place in the order. */
export const FIRST_SEQ = 1;

export async function insertShop({ trx, shopId, random }: SeedContext, name: string): Promise<void> {
  const settings = {
    worthOpeningMg: 100_000,
    maximumBuckets: 2,
    sliverMg: 20_000,
    minimumFromBucketMg: 20_000,
    errorLimit: 0.03,
  };
  await trx
    .insertInto('shops')
    .values({
      id: shopId,
      name,
      locale: 'en-GB',
      timeZone: 'Europe/London',
      currency: 'GBP',
      settings: JSON.stringify(settings),
      changeSeq: FIRST_SEQ,
    })
    .execute();
  await trx.insertInto('shopSync').values({ shopId, epoch: random.uuid(), seq: FIRST_SEQ }).execute();
}

export async function insertPeople(
  context: SeedContext,
  people: readonly { role: Role; name: string; identityId: string }[],
): Promise<void> {
  for (const { role, name, identityId } of people) {
    const id = context.random.uuid();
    context.people.set(role, id);
    await context.trx
      .insertInto('people')
      .values({ shopId: context.shopId, id, identityId, displayName: name, role, changeSeq: FIRST_SEQ })
      .execute();
  }
}

const CONTAINERS = [
  ['Cup 250 ml', 250, 12_000, 2000],
  ['Tub 500 ml', 500, 24_000, 4000],
  ['Tub 1 l', 1000, 68_000, 7000],
  ['Pail 2.5 l', 2500, 140_000, 14_000],
  ['Pail 5 l', 5000, 260_000, 25_000],
] as const;

const SCALES = [
  ['Fine scale', 10, 10, 200, 600_000],
  ['Bench scale', 100, 50, 2000, 6_000_000],
  ['Floor scale', 1000, 1000, 20_000, 30_000_000],
] as const;

export async function insertPlaces(context: SeedContext, locations: number): Promise<void> {
  const { trx, shopId, random } = context;
  for (const [name, capacityMl, tareMg, wallLossMg] of CONTAINERS) {
    const row = { id: random.uuid(), name, capacityMl, tareMg, wallLossMg };
    context.containers.push(row);
    await trx
      .insertInto('containers')
      .values({ shopId, ...row, changeSeq: FIRST_SEQ })
      .execute();
  }
  for (let n = 0; n < locations; n++) {
    const id = random.uuid();
    context.locations.push(id);
    await trx
      .insertInto('locations')
      .values({ shopId, id, code: `${'ABCD'[Math.floor(n / 6)]}${(n % 6) + 1}`, changeSeq: FIRST_SEQ })
      .execute();
  }
  for (const [name, readabilityMg, repeatabilityMg, minimumMg, maximumMg] of SCALES) {
    const id = random.uuid();
    if (name === 'Bench scale') context.scaleId = id;
    await trx
      .insertInto('scales')
      .values({
        shopId,
        id,
        name,
        readabilityMg,
        verificationMg: readabilityMg * 10,
        repeatabilityMg,
        minimumMg,
        maximumMg,
        changeSeq: FIRST_SEQ,
      })
      .execute();
  }
}

/** @param only ink codes of a smaller shop; all when left out */
export async function insertInks(context: SeedContext, only?: readonly string[]): Promise<void> {
  const { trx, shopId, random, today } = context;
  for (const { name, potLifeMin } of FAMILIES) {
    const id = random.uuid();
    context.families.set(name, id);
    await trx
      .insertInto('families')
      .values({ shopId, id, name, returnsAllowed: true, potLifeMin, changeSeq: FIRST_SEQ })
      .execute();
  }
  const family = (name: string) => context.families.get(name) as string;
  for (const { into, from, verdict, reason } of RULES) {
    await trx
      .insertInto('familyRules')
      .values({
        shopId,
        id: random.uuid(),
        intoId: family(into),
        fromId: family(from),
        verdict,
        reason,
        changedAt: today,
        changeSeq: FIRST_SEQ,
      })
      .execute();
  }
  for (const ink of INKS.filter((entry) => only === undefined || only.includes(entry.code))) {
    const id = random.uuid();
    context.inks.set(ink.code, id);
    const [l, a, b] = ink.lab;
    await trx
      .insertInto('components')
      .values({
        shopId,
        id,
        code: ink.code,
        name: ink.name,
        kind: ink.kind,
        familyId: family(ink.family),
        density: ink.density,
        strong: ink.strong,
        foreignLimitPpb: ink.foreignLimitPpb,
        cureC: ink.cureC,
        hazards: ink.kind === 'pigment' ? ['May irritate skin and eyes.'] : [],
        restrictions: [],
        lab: JSON.stringify({ l, a, b }),
        hiding: ink.hiding,
        changeSeq: FIRST_SEQ,
      })
      .execute();
    await insertLots(context, ink.code, id, ink.kind === 'pigment' ? 40_000_000 : 200_000_000);
  }
}

async function insertLots(
  { trx, shopId, random, today, lots }: SeedContext,
  code: string,
  componentId: string,
  receivedMg: number,
): Promise<void> {
  const ids: string[] = [];
  for (let n = 0; n < random.int(1, 3); n++) {
    const id = random.uuid();
    ids.push(id);
    const useBy = new Date(today.getTime() + random.int(120, 420) * DAY_MS).toISOString().slice(0, 10);
    const strengthPpm = random.int(970_000, 1_030_000);
    await trx
      .insertInto('lots')
      .values({
        shopId,
        id,
        componentId,
        code: `${code.replace('-', '')}-${random.int(100, 999)}${n}`,
        strengthPpm,
        receivedMg,
        balanceMg: receivedMg,
        useBy,
        changeSeq: FIRST_SEQ,
      })
      .execute();
  }
  lots.set(componentId, ids);
}
