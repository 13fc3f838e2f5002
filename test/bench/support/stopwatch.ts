/** Medians of several runs, ms, and the last run's result. */
export interface Timing<T> {
  /** By the clock. */
  readonly medianMs: number;
  /** Time that the processors worked for it: other load on the machine hardly changes it. */
  readonly medianCpuMs: number;
  readonly result: T;
}

/** Runs `work` at least once, collecting garbage before each run where Node allows it. */
export async function timeRuns<T>(runs: number, work: () => T | Promise<T>): Promise<Timing<T>> {
  const times: number[] = [];
  const cpuTimes: number[] = [];
  for (;;) {
    globalThis.gc?.();
    const start = performance.now();
    const before = process.cpuUsage();
    const result = await work();
    const used = process.cpuUsage(before);
    times.push(performance.now() - start);
    cpuTimes.push((used.user + used.system) / 1000);
    if (times.length >= runs) {
      return { medianMs: median(times), medianCpuMs: median(cpuTimes), result };
    }
  }
}

/**
 * Runs two works in turn, so that a machine busy with something else slows both alike. The short
 * one may run several times a turn.
 */
export async function timeInTurn<A, B>(
  turns: number,
  [shortRuns, short]: readonly [number, () => A],
  long: () => B,
): Promise<[Timing<A>, Timing<B>]> {
  const one: Timing<A>[] = [];
  const other: Timing<B>[] = [];
  for (let turn = 0; turn < turns; turn++) {
    for (let run = 0; run < shortRuns; run++) one.push(await timeRuns(1, short));
    other.push(await timeRuns(1, long));
  }
  return [joinTimings(one), joinTimings(other)];
}

function joinTimings<T>(timings: readonly Timing<T>[]): Timing<T> {
  return {
    medianMs: median(timings.map((timing) => timing.medianMs)),
    medianCpuMs: median(timings.map((timing) => timing.medianCpuMs)),
    result: timings.at(-1)!.result,
  };
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
