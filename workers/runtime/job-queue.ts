import { randomUUID } from 'node:crypto';
import type { Pool, PoolConnection, ResultSetHeader, RowDataPacket } from 'mysql2/promise';
import type { JobError } from '../../shared/jobs/job-map.js';

/** A lease longer than any pause of a healthy worker, renewed three times while it lasts. */
export const leaseSeconds = 15;
export const renewEveryMs = 5000;
/** So often a job is begun before its worker's death is taken for its own fault. */
const mostAttempts = 3;

export interface ClaimedJob {
  readonly id: string;
  readonly kind: string;
  readonly input: unknown;
  readonly attempts: number;
  readonly leaseToken: string;
}

interface JobRow extends RowDataPacket {
  id: string;
  kind: string;
  input: unknown;
  attempts: number;
  state: 'queued' | 'running';
  cancelRequested: number;
  enoughRequested: number;
}

const columns = 'id, kind, input, attempts, state, cancel_requested AS cancelRequested';
const now = 'UTC_TIMESTAMP(3)';
const leaseEnd = `${now} + INTERVAL ${leaseSeconds} SECOND`;

/**
 * The worker's side of the jobs table. Every write names the lease it is made under and answers
 * whether it still held: a worker that lost its lease must drop the job. Times are the database's, UTC.
 */
export function createJobQueue({ pool }: { pool: Pool }) {
  /** Takes the oldest waiting job, or one whose worker has died; null when there is nothing to do. */
  async function claim(): Promise<ClaimedJob | null> {
    for (;;) {
      const found = await inTransaction(pool, takeOne);
      if (found !== 'settled') return found;
    }
  }

  async function renew(job: ClaimedJob): Promise<boolean> {
    return await write(job, `lease_until = ${leaseEnd}`, []);
  }

  async function report(job: ClaimedJob, stage: string, fraction: number): Promise<boolean> {
    return await write(job, 'stage = ?, fraction = ?', [stage.slice(0, 120), fraction]);
  }

  /** What someone wants of the job; `lost` when it is no longer ours. */
  async function wish(job: ClaimedJob): Promise<'go on' | 'enough' | 'cancel' | 'lost'> {
    const [rows] = await pool.execute<JobRow[]>(
      `SELECT cancel_requested AS cancelRequested, enough_requested AS enoughRequested FROM jobs WHERE id = ? AND lease_token = ?`,
      [job.id, job.leaseToken],
    );
    if (rows.length === 0) return 'lost';
    if (rows[0].cancelRequested) return 'cancel';
    return rows[0].enoughRequested ? 'enough' : 'go on';
  }

  async function finish(job: ClaimedJob, output: unknown): Promise<boolean> {
    return await end(job, `state = 'done', fraction = 1, output = ?`, [JSON.stringify(output)]);
  }

  async function fail(job: ClaimedJob, error: JobError): Promise<boolean> {
    return await end(job, `state = 'failed', error = ?`, [JSON.stringify(error)]);
  }

  async function cancel(job: ClaimedJob): Promise<boolean> {
    return await end(job, `state = 'cancelled'`, []);
  }

  /** Puts a job back untouched; stopping a worker is not an attempt that failed. */
  async function release(job: ClaimedJob): Promise<boolean> {
    return await write(
      job,
      `state = 'queued', stage = '', fraction = 0, attempts = GREATEST(attempts - 1, 0),
       started_at = NULL, lease_token = NULL, lease_until = NULL`,
      [],
    );
  }

  async function end(job: ClaimedJob, what: string, values: string[]): Promise<boolean> {
    return await write(
      job,
      `${what}, finished_at = ${now}, lease_token = NULL, lease_until = NULL`,
      values,
    );
  }

  async function write(
    job: ClaimedJob,
    what: string,
    values: (string | number)[],
  ): Promise<boolean> {
    const [result] = await pool.execute<ResultSetHeader>(
      `UPDATE jobs SET ${what} WHERE id = ? AND lease_token = ?`,
      [...values, job.id, job.leaseToken],
    );
    return result.affectedRows === 1;
  }

  return { claim, renew, report, wish, finish, fail, cancel, release };
}
export type JobQueue = ReturnType<typeof createJobQueue>;

/** Begins the next job. `settled`: one was found that only had to be closed, so look again. */
async function takeOne(connection: PoolConnection): Promise<ClaimedJob | null | 'settled'> {
  // ORDER BY follows the index; any other order would lock every waiting row for this claim.
  const row =
    (await first(
      connection,
      `SELECT ${columns} FROM jobs WHERE state = 'queued' AND run_after <= ${now}
       ORDER BY run_after, id LIMIT 1 FOR UPDATE SKIP LOCKED`,
    )) ??
    (await first(
      connection,
      `SELECT ${columns} FROM jobs WHERE state = 'running' AND lease_until < ${now}
       ORDER BY lease_until LIMIT 1 FOR UPDATE SKIP LOCKED`,
    ));
  if (!row) return null;
  if (row.cancelRequested) {
    await connection.execute(
      `UPDATE jobs SET state = 'cancelled', finished_at = ${now}, lease_token = NULL,
       lease_until = NULL WHERE id = ?`,
      [row.id],
    );
    return 'settled';
  }
  if (row.attempts >= mostAttempts) {
    const error: JobError = {
      code: 'abandoned',
      message: `The work was begun ${mostAttempts} times and broke off each time. The model may need more memory than this machine has.`,
    };
    await connection.execute(
      `UPDATE jobs SET state = 'failed', error = ?, finished_at = ${now}, lease_token = NULL,
       lease_until = NULL WHERE id = ?`,
      [JSON.stringify(error), row.id],
    );
    return 'settled';
  }
  const leaseToken = randomUUID();
  await connection.execute(
    `UPDATE jobs SET state = 'running', attempts = attempts + 1, lease_token = ?,
     lease_until = ${leaseEnd}, started_at = ${now}, stage = '', fraction = 0 WHERE id = ?`,
    [leaseToken, row.id],
  );
  const input: unknown = typeof row.input === 'string' ? JSON.parse(row.input) : row.input;
  return { id: row.id, kind: row.kind, input, attempts: row.attempts + 1, leaseToken };
}

async function first(connection: PoolConnection, query: string): Promise<JobRow | undefined> {
  const [rows] = await connection.query<JobRow[]>(query);
  return rows[0];
}

async function inTransaction<R>(
  pool: Pool,
  block: (connection: PoolConnection) => Promise<R>,
): Promise<R> {
  const connection = await pool.getConnection();
  try {
    // Read committed: a claim locks the row it takes and no gap beside it.
    await connection.query('SET TRANSACTION ISOLATION LEVEL READ COMMITTED');
    await connection.beginTransaction();
    const result = await block(connection);
    await connection.commit();
    connection.release();
    return result;
  } catch (error) {
    // Whatever broke, the connection's state is unknown: drop it, the server rolls back.
    connection.destroy();
    throw error;
  }
}
