import type { MessagePort } from 'node:worker_threads';
import { jobSchemas, type JobMap, type JobName } from '../../shared/jobs/job-map.js';
import { jobHandlers } from '../jobs/job-handlers.js';
import { isAbortError, isEnoughWhenSet, throwWhenSet } from './cancellation.js';
import type { JobHandler } from './job-handler.js';
import { JobRefusal } from './job-refusal.js';
import { steadyProgress } from './progress.js';
import { createDiskStorage } from './storage.js';

/** What the worker process hands to a thread. */
export interface ThreadTask {
  readonly kind: string;
  readonly input: unknown;
  readonly storageFolder: string;
  readonly cancelFlag: Int32Array;
  /** Carries `ProgressMessage`s; transferred, closed by the thread. */
  readonly port: MessagePort;
}

export interface ProgressMessage {
  readonly stage: string;
  readonly fraction: number;
}

/** How a job ended, as plain data: errors do not cross threads whole. */
export type ThreadOutcome =
  | { readonly kind: 'done'; readonly output: unknown }
  | { readonly kind: 'refused'; readonly message: string }
  | { readonly kind: 'cancelled' }
  | { readonly kind: 'failed'; readonly name: string; readonly detail: string };

function isJobName(kind: string): kind is JobName {
  return Object.hasOwn(jobSchemas, kind);
}

/** Runs one job; the thread's only entry. Input and output are checked against the contract here. */
export default async function runJob(task: ThreadTask): Promise<ThreadOutcome> {
  try {
    if (!isJobName(task.kind)) throw new Error(`No handler for a job of kind ${task.kind}.`);
    return { kind: 'done', output: await runKind(task.kind, task) };
  } catch (error) {
    if (error instanceof JobRefusal) return { kind: 'refused', message: error.message };
    if (isAbortError(error)) return { kind: 'cancelled' };
    const { name, stack, message } = error instanceof Error ? error : new Error(String(error));
    return { kind: 'failed', name, detail: stack ?? message };
  } finally {
    task.port.close();
  }
}

async function runKind<N extends JobName>(kind: N, task: ThreadTask): Promise<unknown> {
  const schemas = jobSchemas[kind];
  // The map's types pair each name with its own handler and schemas; the checker cannot follow an index.
  const handle = jobHandlers[kind] as unknown as JobHandler<N>;
  const input = schemas.input.parse(task.input) as JobMap[N]['input'];
  const output = await handle(
    input,
    { storage: createDiskStorage(task.storageFolder) },
    {
      throwIfCancelled: throwWhenSet(task.cancelFlag),
      isEnough: isEnoughWhenSet(task.cancelFlag),
      progress: steadyProgress((stage, fraction) =>
        task.port.postMessage({ stage, fraction } satisfies ProgressMessage),
      ),
    },
  );
  return schemas.output.parse(output);
}
