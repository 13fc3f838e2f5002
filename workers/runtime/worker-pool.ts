import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import { createCancelFlag, setCancelFlag, setEnoughFlag } from './cancellation.js';
import type { ProgressMessage, ThreadOutcome, ThreadTask } from './job-thread.js';

/** How long a job may ignore its cancellation before its thread is ended, ms. */
const deafAfterMs = 2000;
/** An idle thread is given up after this, ms: with it goes the memory of a large model. */
const idleMs = 60_000;

export interface ThreadRun {
  /** Always fulfils; a thread that dies is an outcome too. */
  readonly outcome: Promise<ThreadOutcome>;
  /** Asks the job to stop, and ends its thread when it does not within two seconds. */
  readonly cancel: () => void;
  /** Asks the job to end with the best it has; it may take its time. */
  readonly enough: () => void;
}

export interface JobThread {
  readonly run: (
    job: { kind: string; input: unknown },
    onProgress: (progress: ProgressMessage) => void,
  ) => ThreadRun;
  /** Ends the thread; the next job gets a fresh one. */
  readonly discard: () => Promise<void>;
}

const fromSource = import.meta.url.endsWith('.ts');
const jobEntry = new URL(`./job-thread.${fromSource ? 'ts' : 'js'}`, import.meta.url);

/**
 * One thread for one job at a time, started when needed. From source and from dist alike.
 * @param entry what the thread runs; only tests bring another one
 */
export function createJobThread(storageFolder: string, entry: URL = jobEntry): JobThread {
  const register = new URL('../ts-register.mjs', import.meta.url);
  let pool: Piscina<ThreadTask, ThreadOutcome> | undefined;

  function startPool(): Piscina<ThreadTask, ThreadOutcome> {
    return new Piscina<ThreadTask, ThreadOutcome>({
      filename: entry.href,
      // A thread does not inherit tsx, see ts-register.mjs; and no flag of the process is meant for it.
      execArgv: fromSource ? ['--import', register.href] : [],
      minThreads: 0,
      maxThreads: 1,
      idleTimeout: idleMs,
    });
  }

  return {
    run: (job, onProgress) => {
      pool ??= startPool();
      const cancelFlag = createCancelFlag();
      const { port1: own, port2: port } = new MessageChannel();
      const kill = new AbortController();
      let deafTimer: NodeJS.Timeout | undefined;
      own.on('message', onProgress);
      const outcome = pool
        .run(
          { ...job, storageFolder, cancelFlag, port },
          { transferList: [port], signal: kill.signal },
        )
        .catch((error: unknown): ThreadOutcome => {
          if (kill.signal.aborted) return { kind: 'cancelled' };
          const { name, message, stack } =
            error instanceof Error ? error : new Error(String(error));
          return { kind: 'failed', name, detail: stack ?? message };
        })
        .finally(() => {
          clearTimeout(deafTimer);
          own.close();
        });
      return {
        outcome,
        cancel: () => {
          setCancelFlag(cancelFlag);
          deafTimer ??= setTimeout(() => kill.abort(), deafAfterMs);
        },
        enough: () => setEnoughFlag(cancelFlag),
      };
    },
    discard: async () => {
      const old = pool;
      pool = undefined;
      await old?.destroy();
    },
  };
}
