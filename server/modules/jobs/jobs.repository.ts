import { and, asc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import type { JobError, JobMap, JobName } from '../../../shared/jobs/job-map.js';
import type { Db } from '../../platform/db/client.js';
import { jobs } from './jobs.table.js';

export type JobsRepository = ReturnType<typeof createJobsRepository>;

/** A job without its input and output, which may be large. */
export type JobRow = Awaited<ReturnType<JobsRepository['findMany']>>[number];
/** A job with all that settling needs. */
export type FinalJob = NonNullable<Awaited<ReturnType<JobsRepository['lockUnsettled']>>>;

const FINAL = ['done', 'failed', 'cancelled'] as const;
const now = sql`CURRENT_TIMESTAMP(3)`;

const shown = {
  id: jobs.id,
  workshopId: jobs.workshopId,
  kind: jobs.kind,
  subjectId: jobs.subjectId,
  state: jobs.state,
  stage: jobs.stage,
  fraction: jobs.fraction,
  error: jobs.error,
  settledAt: jobs.settledAt,
};

const isMine = ({ id, workshopId }: { id: string; workshopId: string }) =>
  and(eq(jobs.id, id), eq(jobs.workshopId, workshopId));

export function createJobsRepository({ db }: { db: Db }) {
  /** Ends a queued job at once and asks the worker of a running one to stop. */
  async function cancel(key: { id: string; workshopId: string }): Promise<void> {
    const [ended] = await db
      .update(jobs)
      .set({ state: 'cancelled', cancelRequested: true, finishedAt: now })
      .where(and(isMine(key), eq(jobs.state, 'queued')));
    if (ended.affectedRows === 0)
      await db
        .update(jobs)
        .set({ cancelRequested: true })
        .where(and(isMine(key), eq(jobs.state, 'running')));
  }

  return {
    /** Puts a job in the queue. All moments come from the database's clock, as the worker's do. */
    async add<N extends JobName>(job: {
      id: string;
      workshopId: string;
      kind: N;
      subjectId: string;
      input: JobMap[N]['input'];
    }): Promise<void> {
      await db
        .insert(jobs)
        .values({ ...job, state: 'queued', stage: 'Waiting', runAfter: now, createdAt: now });
    },

    async findMany(ids: readonly string[]) {
      if (ids.length === 0) return [];
      return db
        .select(shown)
        .from(jobs)
        .where(inArray(jobs.id, [...new Set(ids)]));
    },

    async find(key: { id: string; workshopId: string }) {
      const rows = await db.select(shown).from(jobs).where(isMine(key)).limit(1);
      return rows[0] ?? null;
    },

    cancel,

    /** Asks the worker of a waiting or running job to end it with the best it has. */
    async enough(key: { id: string; workshopId: string }): Promise<void> {
      await db
        .update(jobs)
        .set({ enoughRequested: true })
        .where(and(isMine(key), inArray(jobs.state, ['queued', 'running'])));
    },

    /** Final jobs whose result is not stored yet, oldest first. */
    async listUnsettled(limit: number): Promise<string[]> {
      const rows = await db
        .select({ id: jobs.id })
        .from(jobs)
        .where(and(isNull(jobs.settledAt), inArray(jobs.state, [...FINAL])))
        .orderBy(asc(jobs.finishedAt))
        .limit(limit);
      return rows.map((row) => row.id);
    },

    /**
     * A final, unsettled job, locked until the transaction ends. Null when another server has it or
     * has settled it meanwhile.
     */
    async lockUnsettled(id: string) {
      const rows = await db
        .select({ ...shown, input: jobs.input, output: jobs.output })
        .from(jobs)
        .where(and(eq(jobs.id, id), isNull(jobs.settledAt), inArray(jobs.state, [...FINAL])))
        .for('update', { skipLocked: true });
      return rows[0] ?? null;
    },

    /** The output is dropped: its record has it now, and it may be large. */
    async markSettled(id: string): Promise<void> {
      await db.update(jobs).set({ settledAt: now, output: null }).where(eq(jobs.id, id));
    },

    /** Settles a job whose result turned out to be unusable. */
    async markFailed(id: string, error: JobError): Promise<void> {
      await db.update(jobs).set({ state: 'failed', error, settledAt: now }).where(eq(jobs.id, id));
    },

    /**
     * For a record that is being deleted: forgets its job when that is settled, else asks it to
     * stop; the settlement then finds no record and clears up.
     */
    async removeOrCancel(key: { id: string; workshopId: string }): Promise<void> {
      const [gone] = await db.delete(jobs).where(and(isMine(key), isNotNull(jobs.settledAt)));
      if (gone.affectedRows === 0) await cancel(key);
    },

    async remove(id: string): Promise<void> {
      await db.delete(jobs).where(eq(jobs.id, id));
    },
  };
}
