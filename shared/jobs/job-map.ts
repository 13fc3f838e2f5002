import * as z from 'zod';
import { inspectInput, inspectOutput } from './model-inspect.js';
import { planInput, planOutput } from './plan-make.js';

/** The worker contract: every kind of job with its input and output. The single source. */
export const jobSchemas = {
  'model.inspect': { input: inspectInput, output: inspectOutput },
  'plan.make': { input: planInput, output: planOutput },
} as const;

export type JobName = keyof typeof jobSchemas;
export const jobNames = Object.keys(jobSchemas) as JobName[];
export type JobMap = {
  [N in JobName]: {
    input: z.infer<(typeof jobSchemas)[N]['input']>;
    output: z.infer<(typeof jobSchemas)[N]['output']>;
  };
};

export const jobStates = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;
export type JobState = (typeof jobStates)[number];
/** Whether a job will not change any more. */
export function isFinal(state: JobState): boolean {
  return state === 'done' || state === 'failed' || state === 'cancelled';
}

/** A failure as data: `message` is a sentence for the person, never a stack. */
export const jobErrorSchema = z.object({
  /** `refused`: the input is at fault; `failed`: we are; `abandoned`: its worker died too often. */
  code: z.enum(['refused', 'failed', 'abandoned']),
  message: z.string(),
});
export type JobError = z.infer<typeof jobErrorSchema>;

/** Reports how far a job is. `stage` is shown to people; `fraction` is in [0, 1] and never falls. */
export type ReportProgress = (stage: string, fraction: number) => void;
