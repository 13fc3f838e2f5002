/** Set once when the process has to end; waits end early then. */
export interface StopSignal {
  readonly requested: () => boolean;
  readonly request: () => void;
  /** Fulfils after `ms`, or at once when a stop is requested. */
  readonly pause: (ms: number) => Promise<void>;
}

export function createStopSignal(): StopSignal {
  let isRequested = false;
  const waiting = new Set<() => void>();
  return {
    requested: () => isRequested,
    request: () => {
      isRequested = true;
      for (const wake of waiting) wake();
    },
    pause: (ms) =>
      new Promise((resolve) => {
        if (isRequested) return resolve();
        const wake = () => {
          clearTimeout(timer);
          waiting.delete(wake);
          resolve();
        };
        const timer = setTimeout(wake, ms);
        waiting.add(wake);
      }),
  };
}
