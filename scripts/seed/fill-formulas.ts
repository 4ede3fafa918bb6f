import { FIRST_SEQ } from './fill-shop.ts';
import { type Recipe, previewOf } from './recipes.ts';
import { type SeedContext, DAY_MS } from './seed-context.ts';

export async function insertFormulas(context: SeedContext, recipes: readonly Recipe[]): Promise<void> {
  const { trx, shopId, random } = context;
  const revisions = [];
  const parts = [];
  for (const recipe of recipes) {
    const id = random.uuid();
    const familyId = context.families.get(recipe.family) as string;
    await trx
      .insertInto('formulas')
      .values({ shopId, id, code: recipe.code, name: recipe.name, changeSeq: FIRST_SEQ })
      .execute();
    for (const [n, revision] of recipe.revisions.entries()) {
      const { lab, hiding } = previewOf(revision.parts);
      const approvedBy = revision.state === 'draft' ? null : (context.people.get('manager') ?? null);
      revisions.push({
        shopId,
        formulaId: id,
        revision: n + 1,
        state: revision.state,
        familyId,
        lab: JSON.stringify(lab),
        hiding,
        approvedBy,
      });
      for (const [position, [ink, amount]] of revision.parts.entries()) {
        parts.push({
          shopId,
          formulaId: id,
          revision: n + 1,
          position: position + 1,
          componentId: context.inks.get(ink) as string,
          parts: amount,
        });
      }
    }
    const used = recipe.revisions.findLastIndex((revision) => revision.state === 'approved');
    if (used === -1) continue;
    const chosen = recipe.revisions[used] as Recipe['revisions'][number];
    context.formulas.push({
      id,
      code: recipe.code,
      name: recipe.name,
      revision: used + 1,
      familyId,
      parts: chosen.parts.map(([ink, amount]) => ({ componentId: context.inks.get(ink) as string, parts: amount })),
    });
  }
  for (let n = 0; n < revisions.length; n += 500)
    await trx
      .insertInto('formulaRevisions')
      .values(revisions.slice(n, n + 500))
      .execute();
  for (let n = 0; n < parts.length; n += 500)
    await trx
      .insertInto('formulaParts')
      .values(parts.slice(n, n + 500))
      .execute();
}

const CUSTOMERS = [
  'Rowing club',
  'School fair',
  'Brass band',
  'Bakery staff',
  'Summer camp',
  'Climbing hall',
  'Museum shop',
];
const GARMENTS = [
  ['Cotton tee', null],
  ['Polyester sports shirt', 140],
  ['Cotton hoodie', null],
  ['Tri-blend tee', 165],
] as const;

/** A week of jobs from the day that counts as today. */
export async function insertJobs(context: SeedContext, count: number): Promise<void> {
  const { trx, shopId, random, today } = context;
  const known = context.formulas.filter((formula) => ['QF-0317', 'QF-0302'].includes(formula.code));
  for (let n = 0; n < count; n++) {
    const id = random.uuid();
    context.jobs.push(id);
    const [garment, maxCureC] = random.pick(GARMENTS);
    const due = new Date(today.getTime() + Math.floor(n / 2) * DAY_MS + (n % 2 === 0 ? 15.5 : 17) * 3_600_000);
    await trx
      .insertInto('jobs')
      .values({
        shopId,
        id,
        number: `J-${2231 + n}`,
        customer: random.pick(CUSTOMERS),
        due,
        garment,
        compliance: [],
        maxCureC: n === 0 ? null : maxCureC,
        changeSeq: FIRST_SEQ,
      })
      .execute();
    for (let colour = 1; colour <= random.int(1, 4); colour++) {
      const formula = n === 0 && colour === 1 ? known.find((entry) => entry.code === 'QF-0317') : undefined;
      const needMg = random.int(12, 160) * 10_000;
      await trx
        .insertInto('jobColours')
        .values({
          shopId,
          jobId: id,
          n: colour,
          formulaId: (formula ?? random.pick(context.formulas)).id,
          prints: random.int(4, 60) * 10,
          needLowMg: Math.round(needMg * 0.85),
          needMg,
          needHighMg: Math.round(needMg * 1.25),
        })
        .execute();
    }
  }
}
