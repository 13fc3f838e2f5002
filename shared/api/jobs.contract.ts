import * as z from 'zod';
import { jobErrorSchema, jobNames, jobStates } from '../jobs/job-map.js';
import { recordId } from './ids.js';

/** A job as people see it; also the data of every server-sent `job` event. */
export const jobResponse = z.object({
  id: recordId,
  kind: z.enum(jobNames as [string, ...string[]]),
  state: z.enum(jobStates),
  stage: z.string(),
  fraction: z.number().min(0).max(1),
  error: jobErrorSchema.nullable(),
});
export type JobResponse = z.infer<typeof jobResponse>;
