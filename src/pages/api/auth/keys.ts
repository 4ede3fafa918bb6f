import type { APIRoute } from 'astro';
import { publicGrantKeys } from '#server/auth/grants.ts';

export const GET: APIRoute = () => Response.json(publicGrantKeys());
