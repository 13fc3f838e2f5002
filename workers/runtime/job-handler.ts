import type { JobMap, JobName } from '../../shared/jobs/job-map.js';
import type { JobContext } from './job-context.js';
import type { Storage } from './storage.js';

/** What a job may reach outside itself. */
export interface JobEnvironment {
  readonly storage: Storage;
}

/**
 * Does one kind of job. Refuses input with a `JobRefusal`, ends with an `AbortError` when cancelled;
 * anything else it throws is our own fault. Files are written before the output names them.
 */
export type JobHandler<N extends JobName> = (
  input: JobMap[N]['input'],
  env: JobEnvironment,
  context: JobContext,
) => Promise<JobMap[N]['output']>;
