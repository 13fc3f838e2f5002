import { type JobResponse } from '../../../shared/api/jobs.contract.js';
import { isFinal } from '../../../shared/jobs/job-map.js';
import type { Logger } from '../../platform/logging/logger.js';
import { toJobResponse } from './jobs.mapper.js';
import type { JobsRepository } from './jobs.repository.js';
import type { JobSettler } from './job-settler.js';

/** Gets every change of one job; `null` when the job was removed. Final states come last. */
export type JobListener = (job: JobResponse | null) => void;

export type JobMonitor = ReturnType<typeof createJobMonitor>;

const POLL_MS = 400;

/**
 * Looks at the queue a few times a second: settles what is final, then tells listeners what changed.
 * One query serves all listeners.
 */
export function createJobMonitor(deps: {
  jobs: Pick<JobsRepository, 'findMany'>;
  settler: JobSettler;
  logger: Logger;
  pollMs?: number;
}) {
  const pollMs = deps.pollMs ?? POLL_MS;
  const listeners = new Map<JobListener, { jobId: string; last: string }>();
  let timer: NodeJS.Timeout | null = null;
  let running: Promise<void> | null = null;
  let isStopped = true;
  let isFailing = false;

  async function look(): Promise<void> {
    await deps.settler.settleAll();
    if (listeners.size === 0) return;
    const rows = await deps.jobs.findMany([...listeners.values()].map((entry) => entry.jobId));
    const byId = new Map(rows.map((row) => [row.id, toJobResponse(row)]));
    for (const [listener, entry] of listeners) {
      const job = byId.get(entry.jobId) ?? null;
      const text = JSON.stringify(job);
      if (text === entry.last) continue;
      entry.last = text;
      if (!job || isFinal(job.state)) listeners.delete(listener);
      listener(job);
    }
  }

  async function tick(): Promise<void> {
    timer = null;
    running = look().then(
      () => {
        isFailing = false;
      },
      (error: unknown) => {
        // The database may be away for a while: say so once and go on looking.
        if (!isFailing) deps.logger.error({ err: error }, 'looking at the queue failed');
        isFailing = true;
      },
    );
    await running;
    if (!isStopped) timer = setTimeout(() => void tick(), pollMs);
  }

  return {
    start(): void {
      if (!isStopped) return;
      isStopped = false;
      void tick();
    },

    /** Ends after the look that is under way. */
    async stop(): Promise<void> {
      isStopped = true;
      if (timer) clearTimeout(timer);
      await running;
      listeners.clear();
    },

    /** @returns how to stop listening */
    subscribe(jobId: string, listener: JobListener): () => void {
      listeners.set(listener, { jobId, last: '' });
      return () => listeners.delete(listener);
    },

    /** For the tests: nobody may be left behind. */
    listenerCount: () => listeners.size,
  };
}
