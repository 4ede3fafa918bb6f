import type { APIRoute } from 'astro';
import { sql } from 'kysely';
import { database } from '#server/db/connection.ts';

/** Answers when the database does; 503 with Retry-After until then. */
export const GET: APIRoute = async () => {
  await sql`select 1`.execute(database());
  return Response.json({ status: 'ready' });
};
