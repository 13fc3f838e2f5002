import type { Logger } from 'pino';
import type { JobError } from '../../shared/jobs/job-map.js';
import { createBackoff, isTransient } from './database-retry.js';
import { renewEveryMs, type ClaimedJob, type JobQueue } from './job-queue.js';
import type { ProgressMessage, ThreadOutcome } from './job-thread.js';
import type { StopSignal } from './stop-signal.js';
import type { JobThread } from './worker-pool.js';

/** Progress reaches the database at most this often, ms; wishes to cancel are read as often. */
const beatMs = 250;
/** A stopping process tries so long to write down how its job ended, ms. */
const lastWriteMs = 1500;

/** Why a running job is stopped: the person's wish, the process ends, or another worker has it. */
type Fate = 'go on' | 'cancel' | 'release' | 'lost';

const failedMessage =
  'This did not work, and the fault is ours, not the file’s. The details are in the log; trying again may help.';
const memoryMessage =
  'The model needs more memory than this machine gives to one job. A coarser export of it may work.';

/** Runs one claimed job to its end and writes down how it ended. Never throws for what a job does. */
export async function runClaimedJob(options: {
  job: ClaimedJob;
  queue: JobQueue;
  thread: JobThread;
  stop: StopSignal;
  log: Logger;
}): Promise<void> {
  const { job, queue, thread, stop, log } = options;
  let latest: ProgressMessage | undefined;
  const run = thread.run(job, (progress) => (latest = progress));
  const ended = run.outcome;
  let fate: Fate = 'go on';
  let renewAtMs = performance.now() + renewEveryMs;

  async function beat(): Promise<Fate> {
    if (stop.requested()) return 'release';
    if (latest) {
      const { stage, fraction } = latest;
      latest = undefined;
      if (!(await queue.report(job, stage, fraction))) return 'lost';
    }
    if (performance.now() >= renewAtMs) {
      if (!(await queue.renew(job))) return 'lost';
      renewAtMs = performance.now() + renewEveryMs;
    }
    const wish = await queue.wish(job);
    if (wish !== 'enough') return wish;
    run.enough();
    return 'go on';
  }

  let outcome: ThreadOutcome | void;
  for (;;) {
    outcome = await Promise.race([ended, fate === 'go on' ? stop.pause(beatMs) : ended]);
    if (outcome) break;
    try {
      fate = await beat();
    } catch (error) {
      // The database is away: the job goes on, and the lease decides when it is back.
      if (!isTransient(error)) throw error;
      log.warn({ jobId: job.id, err: error }, 'database away while a job runs');
    }
    if (fate !== 'go on') run.cancel();
  }

  if (outcome.kind === 'failed') {
    log.error({ jobId: job.id, kind: job.kind, detail: outcome.detail }, 'job failed');
    // After a trap nothing in that thread can be trusted.
    await thread.discard();
  }
  if (fate === 'lost') {
    log.warn({ jobId: job.id }, 'lease lost, job dropped');
    return;
  }
  const held = await persist(() => conclude(queue, job, fate, outcome), { stop, log });
  log.info({ jobId: job.id, kind: job.kind, outcome: outcome.kind, fate, held }, 'job ended');
}

function conclude(
  queue: JobQueue,
  job: ClaimedJob,
  fate: Fate,
  outcome: ThreadOutcome,
): Promise<boolean> {
  switch (outcome.kind) {
    case 'done':
      return queue.finish(job, outcome.output);
    case 'refused':
      return queue.fail(job, { code: 'refused', message: outcome.message });
    case 'failed':
      return queue.fail(job, errorOf(outcome.name, outcome.detail));
    case 'cancelled':
      return fate === 'release' ? queue.release(job) : queue.cancel(job);
  }
}

function errorOf(name: string, detail: string): JobError {
  const isMemory = /out of memory|array buffer allocation failed|invalid array length/i.test(
    `${name} ${detail}`,
  );
  return { code: 'failed', message: isMemory ? memoryMessage : failedMessage };
}

/** Repeats a write until the database takes it; a stopping process gives up and lets the lease run out. */
async function persist(
  write: () => Promise<boolean>,
  { stop, log }: { stop: StopSignal; log: Logger },
): Promise<boolean> {
  const backoff = createBackoff();
  const startMs = performance.now();
  for (;;) {
    try {
      return await write();
    } catch (error) {
      if (!isTransient(error)) throw error;
      if (stop.requested() && performance.now() - startMs > lastWriteMs) return false;
      log.warn({ err: error }, 'database away, the end of a job waits');
      await new Promise((resolve) => setTimeout(resolve, backoff.nextMs()));
    }
  }
}
