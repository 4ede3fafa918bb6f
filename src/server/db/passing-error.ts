/**
 * A lost or refused connection, a time-out, a deadlock, a full disk: nothing was decided, the same request may succeed
 * later. SQLSTATE classes of PostgreSQL, appendix A; codes of the operating system's network.
 */
export function isPassing(error: unknown): boolean {
  const code = (error as { code?: unknown } | null)?.code;
  if (typeof code === 'string' && PASSING.test(code)) return true;
  return LOST.test(String(error));
}

const PASSING = /^(08|40|53|55P03|57|ECONN|EPIPE|ETIMEDOUT|ENOTFOUND|EHOSTUNREACH|ENETUNREACH|EAI_AGAIN)/;
/** What the driver says, without a code, of a connection that broke, was never made or is past a broken statement. */
const LOST =
  /Connection terminated|timeout exceeded when trying to connect|is not queryable|Postgres connection has been discarded|Query read timeout/;
