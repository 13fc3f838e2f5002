import type { ReportProgress } from '../../shared/jobs/job-map.js';

/** What a job gets from its surroundings; nothing in it knows of threads or databases. */
export interface JobContext {
  /** Throws the `AbortError` of cancellation.ts when the job was cancelled. Cheap: call it often. */
  readonly throwIfCancelled: () => void;
  readonly progress: ReportProgress;
  /** Whether the person takes the best so far; a job that has nothing yet goes on. Never by default. */
  readonly isEnough?: () => boolean;
}

/** For tests and for callers who neither watch nor cancel. */
export const silentContext: JobContext = { throwIfCancelled: () => {}, progress: () => {} };

/**
 * The same job seen by one of its steps: the step reports 0 to 1 and the person sees `from` to `to`.
 * Reporting also checks for cancellation, so a step that reports often needs no checks of its own.
 */
export function portionOf(context: JobContext, from: number, to: number): JobContext {
  return {
    throwIfCancelled: context.throwIfCancelled,
    ...(context.isEnough && { isEnough: context.isEnough }),
    progress: (stage, fraction) => {
      context.throwIfCancelled();
      context.progress(stage, from + (to - from) * Math.min(1, Math.max(0, fraction)));
    },
  };
}
