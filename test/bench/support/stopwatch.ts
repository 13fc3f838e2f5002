/** Median wall time of several runs, ms, and the last run's result. */
export interface Timing<T> {
  readonly medianMs: number;
  readonly result: T;
}

/** Runs `work` at least once, collecting garbage before each run where Node allows it. */
export async function timeRuns<T>(runs: number, work: () => T | Promise<T>): Promise<Timing<T>> {
  const times: number[] = [];
  for (;;) {
    globalThis.gc?.();
    const start = performance.now();
    const result = await work();
    times.push(performance.now() - start);
    if (times.length >= runs) return { medianMs: median(times), result };
  }
}

/** Milliseconds that `work` takes, and what it returns. */
export function timeOnce<T>(work: () => T): { ms: number; result: T } {
  const start = performance.now();
  const result = work();
  return { ms: performance.now() - start, result };
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
