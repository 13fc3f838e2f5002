import type { JobResponse } from '../../../shared/api/jobs.contract.js';
import { isFinal } from '../../../shared/jobs/job-map.js';
import type { JobRow } from './jobs.repository.js';

/**
 * A job as people see it. Between the worker's last word and the moment its result is stored it is
 * still shown as running: whoever sees `done` finds the result.
 */
export function toJobResponse(job: JobRow): JobResponse {
  const isSettling = isFinal(job.state) && job.settledAt === null;
  const { id, kind } = job;
  if (isSettling)
    return { id, kind, state: 'running', stage: 'Storing the result', fraction: 1, error: null };
  const fraction = job.state === 'done' ? 1 : Math.min(1, Math.max(0, job.fraction));
  return { id, kind, state: job.state, stage: job.stage, fraction, error: job.error };
}
