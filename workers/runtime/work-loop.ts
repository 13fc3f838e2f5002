import type { Logger } from 'pino';
import { createBackoff, isTransient } from './database-retry.js';
import { runClaimedJob } from './job-runner.js';
import type { ClaimedJob, JobQueue } from './job-queue.js';
import type { StopSignal } from './stop-signal.js';
import type { JobThread } from './worker-pool.js';

/** How often an idle worker looks for work, ms. */
const idleMs = 300;

/** Claims and runs one job after another until a stop is requested. */
export async function workUntilStopped(options: {
  queue: JobQueue;
  thread: JobThread;
  stop: StopSignal;
  log: Logger;
}): Promise<void> {
  const { queue, thread, stop, log } = options;
  const backoff = createBackoff();
  while (!stop.requested()) {
    let job: ClaimedJob | null;
    try {
      job = await queue.claim();
      backoff.reset();
    } catch (error) {
      // Away, restarting, or not migrated yet: wait longer each time, never give up.
      const waitMs = backoff.nextMs();
      log.warn({ err: error, waitMs, transient: isTransient(error) }, 'no answer from the queue');
      await stop.pause(waitMs);
      continue;
    }
    if (!job) {
      await stop.pause(idleMs);
      continue;
    }
    log.info({ jobId: job.id, kind: job.kind, attempt: job.attempts }, 'job begun');
    try {
      await runClaimedJob({ job, queue, thread, stop, log });
    } catch (error) {
      // A statement the database refuses: drop the job, its lease runs out and its attempts are counted.
      log.error({ err: error, jobId: job.id }, 'job could not be recorded');
      await thread.discard();
    }
  }
  await thread.discard();
}
