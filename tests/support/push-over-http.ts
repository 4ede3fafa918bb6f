import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { PROTOCOL, type PushResponse } from '#contract/push.ts';
import type { BenchStation } from '#scripts/bench/sync-stations.ts';

type Outcome = PushResponse['results'][number]['outcome'];

export interface Answer {
  /** Undefined when no answer came: the connection was refused or cut. */
  status: number | undefined;
  retryAfter: string | null;
  outcomes: Outcome[];
}

/** A push as a station sends it, from pages of `origin`; whatever happens to it is an answer. */
export async function pushOverHttp(
  baseUrl: string,
  station: BenchStation,
  ops: readonly unknown[],
  origin = baseUrl,
): Promise<Answer> {
  try {
    const response = await fetch(`${baseUrl}/api/sync/push`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json', Origin: origin, Cookie: `station=${station.cookie}` },
      body: JSON.stringify({ protocol: PROTOCOL, requestId: uuid(), ops }),
    });
    const results = response.status === 200 ? ((await response.json()) as PushResponse).results : [];
    return {
      status: response.status,
      retryAfter: response.headers.get('Retry-After'),
      outcomes: results.map(({ outcome }) => outcome),
    };
  } catch {
    return { status: undefined, retryAfter: null, outcomes: [] };
  }
}

export interface Ledger {
  lost: number;
  /** Operations that are there twice, and movements of one kind that a bucket has twice: these stations make each once. */
  doubled: number;
  /** Buckets of which the balance is not the sum of their movements. */
  unbalanced: number;
}

/** What a superuser finds of these operations, past every policy. */
export async function readLedger(superuserUrl: string, opIds: readonly string[]): Promise<Ledger> {
  const client = new pg.Client({ connectionString: superuserUrl });
  await client.connect();
  const { rows } = await client.query<{ n: number }>(
    'select count(*)::int as n from operations where op_id = any($1) group by op_id',
    [opIds],
  );
  const twice = await client.query<{ n: number }>(
    `select count(*)::int as n from (select 1 from movements where bucket_id in
       (select bucket_id from movements where op_id = any($1)) group by bucket_id, kind having count(*) > 1) m`,
    [opIds],
  );
  const wrong = await client.query<{ n: number }>(
    `select count(*)::int as n from buckets b where b.balance_mg <> (select coalesce(sum(m.delta_mg), 0)
       from movements m where m.shop_id = b.shop_id and m.bucket_id = b.id)`,
  );
  await client.end();
  return {
    lost: opIds.length - rows.length,
    doubled: rows.filter(({ n }) => n > 1).length + (twice.rows[0]?.n ?? Number.NaN),
    unbalanced: wrong.rows[0]?.n ?? Number.NaN,
  };
}

export const opIdsOf = (ops: readonly unknown[]): string[] => ops.map((op) => (op as { opId: string }).opId);
