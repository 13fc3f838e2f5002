import type { JobName } from '../../../shared/jobs/job-map.js';
import type { Transact } from '../../platform/db/transaction.js';
import { isPassing } from '../../platform/db/driver-errors.js';
import type { Logger } from '../../platform/logging/logger.js';
import type { FinalJob, JobsRepository } from './jobs.repository.js';

/**
 * Stores what a final job brought with the record that waits for it. Runs in the transaction that
 * also marks the job as settled, so it happens exactly once.
 * @returns `orphaned` when the record was deleted meanwhile; its files are removed then
 * @throws UnusableResult when the worker's output is not what the contract says
 */
export type Settlement<R> = (job: FinalJob, repos: R) => Promise<Settled>;

/** `replaced` names files that the stored result has made useless; they are removed afterwards. */
export type Settled = 'stored' | 'orphaned' | { readonly replaced: readonly string[] };

/** The worker's output does not hold what the contract promises. */
export class UnusableResult extends Error {
  override readonly name = 'UnusableResult';
}

export type JobSettler = ReturnType<typeof createJobSettler>;

const AT_ONCE = 20;

export function createJobSettler<R extends { jobs: JobsRepository }>(deps: {
  jobs: JobsRepository;
  transact: Transact<R>;
  settlements: Record<JobName, Settlement<R>>;
  /** Removes what an orphaned job left in the file storage. */
  removeFilesOf: (job: FinalJob) => Promise<void>;
  removeFile: (key: string) => Promise<void>;
  logger: Logger;
}) {
  const { transact, settlements, logger } = deps;

  /** Whether it was settled here; false when another server was first. */
  async function settle(id: string): Promise<boolean> {
    const settled = await transact(async (repos) => {
      const job = await repos.jobs.lockUnsettled(id);
      if (!job) return null;
      const outcome = await settlements[job.kind](job, repos);
      if (outcome === 'orphaned') await repos.jobs.remove(id);
      else await repos.jobs.markSettled(id);
      return { job, outcome };
    });
    if (settled?.outcome === 'orphaned') await deps.removeFilesOf(settled.job);
    if (settled && typeof settled.outcome === 'object')
      for (const key of settled.outcome.replaced) await deps.removeFile(key);
    return settled !== null;
  }

  async function settleOrFail(id: string): Promise<boolean> {
    try {
      return await settle(id);
    } catch (error) {
      // The database is away or busy: the next look tries again.
      if (isPassing(error)) throw error;
      // Anything else would fail for ever and keep the person waiting.
      logger.error({ err: error, jobId: id }, 'the result of a job could not be stored');
      await deps.jobs.markFailed(id, {
        code: 'failed',
        message: 'The result of this job could not be stored. Please start it again.',
      });
      return true;
    }
  }

  return {
    /** Settles what is final. @returns how many jobs were settled here */
    async settleAll(): Promise<number> {
      let count = 0;
      for (const id of await deps.jobs.listUnsettled(AT_ONCE)) if (await settleOrFail(id)) count++;
      return count;
    },
  };
}
