import { AbortError } from '../runtime/cancellation.js';

export interface Interruption {
  /** Throws the AbortError once the person pressed Ctrl-C or the system asked to end. */
  readonly throwIfAsked: () => void;
  readonly stopListening: () => void;
}

/**
 * Turns the signals to end into an error, so that half-written files are removed. To be used only
 * while files are written: a signal is heard between two awaits, and long computing has none.
 */
export function listenForInterruption(): Interruption {
  const signals = ['SIGINT', 'SIGTERM'] as const;
  let isAsked = false;
  // Stays registered: a terminal and the starting process may both send the same signal.
  const ask = () => {
    isAsked = true;
  };
  for (const signal of signals) process.on(signal, ask);
  return {
    throwIfAsked: () => {
      if (isAsked) throw new AbortError();
    },
    stopListening: () => {
      for (const signal of signals) process.off(signal, ask);
    },
  };
}
