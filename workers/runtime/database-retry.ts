const transientCodes = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  'ETIMEDOUT',
  'ENOENT',
  'EHOSTUNREACH',
  'ENOTFOUND',
  'EAI_AGAIN',
  'PROTOCOL_CONNECTION_LOST',
  'PROTOCOL_ENQUEUE_AFTER_FATAL_ERROR',
  'ER_CON_COUNT_ERROR',
  'ER_SERVER_SHUTDOWN',
  'ER_LOCK_DEADLOCK',
  'ER_LOCK_WAIT_TIMEOUT',
  'ER_QUERY_INTERRUPTED',
  'ER_CONNECTION_KILLED',
]);

/** Whether the database is away or busy, so that the same statement may work later. */
export function isTransient(error: unknown): boolean {
  if (!(error instanceof Error)) return false;
  const code = (error as NodeJS.ErrnoException).code;
  if (code !== undefined) return transientCodes.has(code);
  // mysql2 words a connection that closed under a query only in its message.
  return /closed state|connection lost|ECONNREFUSED/i.test(error.message);
}

/** Waits that double from 250 ms to 5 s. */
export function createBackoff(): { readonly nextMs: () => number; readonly reset: () => void } {
  let waitMs = 250;
  return {
    nextMs: () => {
      const current = waitMs;
      waitMs = Math.min(5000, waitMs * 2);
      return current;
    },
    reset: () => {
      waitMs = 250;
    },
  };
}
