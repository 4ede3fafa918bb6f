/**
 * Who may call a route: anybody, a live session, an enrolled station, or one that was revoked and hands in its queue. A
 * route that is not listed is refused.
 */
export type Access = 'public' | 'session' | 'station' | 'handing-in';

export const routeAccess: Readonly<Record<string, Access>> = {
  'GET /api/health': 'public',
  'GET /api/ready': 'public',
  'GET /api/metrics': 'public',
  'GET /api/auth/keys': 'public',
  'POST /api/auth/sign-in': 'public',
  'POST /api/auth/sign-out': 'public',
  'POST /api/auth/renew': 'session',
  'POST /api/sync/push': 'handing-in',
  'GET /api/sync/pull': 'station',
};
