import type { ReportProgress } from '../../shared/jobs/job-map.js';

/** Least time between two reports of the same stage, ms: more would only wake the other thread. */
const leastMs = 50;

/** Passes progress on: fractions never fall and stay in [0, 1], and a stage is not reported too often. */
export function steadyProgress(
  post: ReportProgress,
  nowMs: () => number = () => performance.now(),
): ReportProgress {
  let highest = 0;
  let lastStage: string | undefined;
  let lastMs = -Infinity;
  return (stage, fraction) => {
    if (fraction > highest) highest = Math.min(1, fraction);
    const now = nowMs();
    if (stage === lastStage && now - lastMs < leastMs) return;
    lastStage = stage;
    lastMs = now;
    post(stage, highest);
  };
}
