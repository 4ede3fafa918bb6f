import { randomBytes } from 'node:crypto';
import { sql } from 'kysely';
import type { Role } from '#contract/roles.ts';
import { codePrefix } from '#domain/bucket-code.ts';
import { hashPassword } from '#server/auth/passwords.ts';
import { type Database, openDatabase } from '#server/db/connection.ts';
import { inShop } from '#server/db/in-shop.ts';
import { demoSignIns } from '#scripts/demo-sign-ins.mjs';
import { insertFormulas, insertJobs } from './fill-formulas.ts';
import { insertInks, insertPeople, insertPlaces, insertShop } from './fill-shop.ts';
import { History } from './histories.ts';
import { operationWriter } from './operation-writer.ts';
import { type Random, seededRandom } from './random.ts';
import { makeRecipes } from './recipes.ts';
import { type SeedContext, DAY_MS } from './seed-context.ts';
import { liveThroughThreeMonths } from './three-months.ts';

interface Deps {
  ownerUrl: string;
  appUrl: string;
  /** Midnight of the day that counts as today. */
  today: Date;
}

const NAMES: Record<Role, string> = {
  mixer: 'Ines',
  operator: 'Tomas',
  planner: 'Wren',
  manager: 'Odile',
  owner: 'Bram',
};
const SMALL_INKS = ['P-01', 'P-03', 'P-10'];

/** Fills an empty database with the demo shop and a small second one; the same every time for the same day. */
export async function seedDemo({ ownerUrl, appUrl, today }: Deps): Promise<void> {
  const owner = openDatabase(ownerUrl, 1);
  const app = openDatabase(appUrl, 2);
  try {
    await seedFirst(owner, app, today);
    await seedSecond(owner, app, today);
    // As after any bulk load: plans that are made before there are statistics may take the wrong key.
    await sql`analyze`.execute(owner);
  } finally {
    await owner.destroy();
    await app.destroy();
  }
}

async function seedFirst(owner: Database, app: Database, today: Date): Promise<void> {
  const random = seededRandom(1907);
  const people = await insertIdentities(
    owner,
    random,
    demoSignIns.filter((entry) => entry.email.endsWith('@siltlane.example.test')),
  );
  await fill(
    app,
    random,
    today,
    async (context) => {
      await insertShop(context, 'Siltlane Print');
      await insertPeople(context, people);
      await insertPlaces(context, 24);
      await insertInks(context);
      await insertFormulas(context, makeRecipes(random));
      await insertJobs(context, 14);
    },
    120,
  );
}

async function seedSecond(owner: Database, app: Database, today: Date): Promise<void> {
  const random = seededRandom(2003);
  const people = await insertIdentities(
    owner,
    random,
    demoSignIns.filter((entry) => entry.email.endsWith('@gorsegate.example.test')),
  );
  await fill(
    app,
    random,
    today,
    async (context) => {
      await insertShop(context, 'Gorsegate Tees');
      await insertPeople(context, people);
      await insertPlaces(context, 2);
      await insertInks(context, SMALL_INKS);
      const four = [60, 40, 20, 10].map((blue, n) => ({
        code: `GT-${n + 1}`,
        name: ['Deep', 'Middle', 'Light', 'Faint'][n] + ' blue',
        family: 'Standard plastisol',
        revisions: [
          {
            state: 'approved' as const,
            parts: [
              ['P-01', String(900 - blue)],
              ['P-03', '100'],
              ['P-10', String(blue)],
            ] as [string, string][],
          },
        ],
      }));
      await insertFormulas(context, four);
    },
    2,
  );
}

async function insertIdentities(
  owner: Database,
  random: Random,
  signIns: readonly { role: string; email: string; password: string }[],
) {
  const people: { role: Role; name: string; identityId: string }[] = [];
  for (const { role, email, password } of signIns) {
    const identityId = random.uuid();
    await owner
      .insertInto('identities')
      .values({ id: identityId, emailLower: email.toLowerCase(), passwordHash: await hashPassword(password) })
      .execute();
    const known = role.split(' ')[0] as Role;
    people.push({ role: known, name: NAMES[known], identityId });
  }
  return people;
}

/** Documents in one transaction, then the past through the push of a station that stands in the store room. */
async function fill(
  app: Database,
  random: Random,
  today: Date,
  documents: (context: SeedContext) => Promise<void>,
  tubs: number,
): Promise<void> {
  const shopId = random.uuid();
  const station = { shopId, stationId: random.uuid(), installId: random.uuid(), grants: new Map<string, string>() };
  const prefix = codePrefix(0) as string;
  const context = await inShop(app, shopId, async (trx) => {
    const context: SeedContext = {
      trx,
      shopId,
      random,
      today,
      people: new Map(),
      families: new Map(),
      inks: new Map(),
      lots: new Map(),
      containers: [],
      locations: [],
      scaleId: '',
      formulas: [],
      jobs: [],
    };
    await documents(context);
    const long = new Date(today.getTime() + 400 * DAY_MS);
    await trx
      .insertInto('stations')
      .values({
        shopId,
        id: station.stationId,
        name: 'Store room',
        tokenSha256: randomBytes(32),
        expiresAt: today,
        lastSeen: today,
      })
      .execute();
    await trx
      .insertInto('installs')
      .values({ shopId, id: station.installId, stationId: station.stationId, codePrefix: prefix })
      .execute();
    for (const [role, personId] of context.people) {
      const id = random.uuid();
      station.grants.set(personId, id);
      const issuedAt = new Date(today.getTime() - 100 * DAY_MS);
      await trx
        .insertInto('grants')
        .values({ shopId, id, stationId: station.stationId, personId, role, issuedAt, expiresAt: long })
        .execute();
    }
    return context;
  });
  const writer = operationWriter(station, random);
  const history = new History(context, writer, prefix);
  if (tubs > 20) liveThroughThreeMonths(context, history, writer, tubs);
  else
    for (let n = 0; n < tubs; n++) history.mix(context.formulas[n] as SeedContext['formulas'][number], 600_000, 5 - n);
  await writer.send(app);
  if (tubs > 20) await reserveSome(app, shopId);
}

/** Three tubs that are kept for a reorder. */
async function reserveSome(app: Database, shopId: string): Promise<void> {
  await inShop(app, shopId, async (trx) => {
    const kept = await trx
      .selectFrom('buckets')
      .select('id')
      .where('shopId', '=', shopId)
      .where('state', '=', 'shelf')
      .where('grade', '=', 'untouched')
      .orderBy('code')
      .limit(3)
      .execute();
    for (const { id } of kept) {
      await trx
        .updateTable('buckets')
        .set({ reservedFor: 'the reorder' })
        .where('shopId', '=', shopId)
        .where('id', '=', id)
        .execute();
    }
  });
}
