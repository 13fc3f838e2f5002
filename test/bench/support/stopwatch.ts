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

/** Runs two works in turn, so that a machine busy with something else slows both alike. */
export async function timeInTurn<A, B>(
  runs: number,
  one: () => A,
  other: () => B,
): Promise<[Timing<A>, Timing<B>]> {
  const times: [number[], number[]] = [[], []];
  for (;;) {
    const first = await timeRuns(1, one);
    const second = await timeRuns(1, other);
    times[0].push(first.medianMs);
    times[1].push(second.medianMs);
    if (times[0].length < runs) continue;
    return [
      { medianMs: median(times[0]), result: first.result },
      { medianMs: median(times[1]), result: second.result },
    ];
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
