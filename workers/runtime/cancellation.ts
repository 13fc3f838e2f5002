/** Ends a job that was cancelled. Recognised by `isAbortError`, never by class. */
export class AbortError extends Error {
  constructor() {
    super('The job was cancelled.');
    this.name = 'AbortError';
  }
}

/** Whether an error means "cancelled". */
export function isAbortError(error: unknown): boolean {
  return error instanceof Error && error.name === 'AbortError';
}

/** One flag in shared memory: the worker process sets it, the job's thread polls it. */
export function createCancelFlag(): Int32Array {
  return new Int32Array(new SharedArrayBuffer(Int32Array.BYTES_PER_ELEMENT));
}

export function setCancelFlag(flag: Int32Array): void {
  Atomics.store(flag, 0, 1);
}

/** A check to call at stage ends and every few thousand iterations; throws `AbortError` once the flag is set. */
export function throwWhenSet(flag: Int32Array): () => void {
  return () => {
    if (Atomics.load(flag, 0) !== 0) throw new AbortError();
  };
}
