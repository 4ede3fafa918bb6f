import type { APIRoute } from 'astro';

/** The process is alive; whether it can serve is told by /api/ready. */
export const GET: APIRoute = () => Response.json({ status: 'ok' });
