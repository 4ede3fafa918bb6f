/** Who may call a route: anybody, a live session, or an enrolled station. A route that is not listed is refused. */
export type Access = 'public' | 'session' | 'station';

export const routeAccess: Readonly<Record<string, Access>> = {
  'GET /api/health': 'public',
  'GET /api/ready': 'public',
  'GET /api/metrics': 'public',
  'GET /api/auth/keys': 'public',
  'POST /api/auth/sign-in': 'public',
  'POST /api/auth/sign-out': 'public',
  'POST /api/auth/renew': 'session',
  'POST /api/sync/push': 'station',
  'GET /api/sync/pull': 'station',
};
