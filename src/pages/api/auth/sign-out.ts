import type { APIRoute } from 'astro';
import { clearCookie, readCookie } from '#server/auth/cookies.ts';
import { endSession } from '#server/auth/sessions.ts';
import { database } from '#server/db/connection.ts';

/** Ends the person's session; the station stays enrolled and may still send what waits. */
export const POST: APIRoute = async ({ cookies, url }) => {
  await endSession(database(), readCookie(cookies, 'session', url));
  clearCookie(cookies, 'session', url);
  return new Response(null, { status: 204 });
};
