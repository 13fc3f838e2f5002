/** The driver's code of a failed statement, such as `ER_DUP_ENTRY`; Drizzle keeps it in `cause`. */
export function driverCodeOf(error: unknown): string | null {
  for (let at = error; at instanceof Error; at = at.cause) {
    const code = (at as { code?: unknown }).code;
    if (typeof code === 'string') return code;
  }
  return null;
}

/** Whether a statement failed because a unique value is there already. */
export function isDuplicate(error: unknown): boolean {
  return driverCodeOf(error) === 'ER_DUP_ENTRY';
}

const PASSING = [
  'ECONNREFUSED',
  'ECONNRESET',
  'ENOTFOUND',
  'EPIPE',
  'ETIMEDOUT',
  'PROTOCOL_CONNECTION_LOST',
  'ER_CON_COUNT_ERROR',
  'ER_LOCK_DEADLOCK',
  'ER_LOCK_WAIT_TIMEOUT',
  'ER_SERVER_SHUTDOWN',
];

/** Whether the same statement may succeed a little later: no connection, or others in the way. */
export function isPassing(error: unknown): boolean {
  return PASSING.includes(driverCodeOf(error) ?? '');
}
