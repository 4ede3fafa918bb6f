/**
 * A lost or refused connection, a time-out, a deadlock, a full disk: nothing was decided, the same request may succeed
 * later. SQLSTATE classes of PostgreSQL, appendix A.
 */
export function isPassing(error: unknown): boolean {
  const code = (error as { code?: unknown }).code;
  if (typeof code === 'string' && /^(08|40|53|55P03|57|ECONN|EPIPE|ETIMEDOUT|ENOTFOUND)/.test(code)) return true;
  return /Connection terminated|timeout exceeded when trying to connect/.test(String(error));
}
