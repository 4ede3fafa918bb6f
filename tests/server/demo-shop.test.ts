import { createHash } from 'node:crypto';
import pg from 'pg';
import { expect, test } from 'vitest';
import { seedDemo } from '#scripts/seed/seed-demo.ts';
import { makeFreshDatabase } from '#tests/support/fresh-database.ts';

/** Ids and masses of the ledger of both shops, as one fingerprint. */
async function fingerprint(): Promise<string> {
  const fresh = await makeFreshDatabase();
  try {
    await seedDemo({ ownerUrl: fresh.ownerUrl, appUrl: fresh.appUrl, today: new Date('2026-12-01T00:00:00Z') });
    const client = new pg.Client({ connectionString: fresh.appUrl });
    await client.connect();
    const hash = createHash('sha256');
    for (const email of ['mixer@siltlane.example.test', 'mixer@gorsegate.example.test']) {
      await client.query('begin');
      await client.query(`select set_config('app.shop_id', shop_id::text, true) from find_sign_in($1)`, [email]);
      const { rows } = await client.query('select id, code, balance_mg, state from buckets order by id');
      const { rows: formulas } = await client.query('select id, code, name from formulas order by id');
      await client.query('commit');
      expect(rows.length).toBeGreaterThan(1);
      hash.update(JSON.stringify([rows, formulas]));
    }
    await client.end();
    return hash.digest('hex');
  } finally {
    await fresh.drop();
  }
}

test('the demo shops are the same each time for the same day', async () => {
  expect(await fingerprint()).toBe(await fingerprint());
}, 120_000);
