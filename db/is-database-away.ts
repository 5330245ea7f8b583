/** Node's words for a connection that cannot be made, or that broke. */
const BY_NODE = new Set(['ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ETIMEDOUT']);
/**
 * PostgreSQL's: class 08 (connection exception), admin_shutdown, crash_shutdown, cannot_connect_now.
 * Source: PostgreSQL documentation, appendix "Error Codes" (from memory).
 */
const BY_SERVER = /^(08...|57P0[123])$/;
/** Those of its client library, which have no code. */
const BY_CLIENT =
  /Connection terminated|timeout exceeded when trying to connect|connection error and is not queryable/;

/** Whether a fault, or one that caused it, means that the database cannot be reached now, not that it refused something. */
export function isDatabaseAway(error: unknown): boolean {
  for (let at = error; at instanceof Error; at = at.cause) {
    const { code } = at as Error & { code?: unknown };
    if (typeof code === 'string' && (BY_NODE.has(code) || BY_SERVER.test(code))) return true;
    if (BY_CLIENT.test(at.message)) return true;
  }
  return false;
}
