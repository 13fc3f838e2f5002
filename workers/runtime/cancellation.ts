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

const CANCELLED = 1;
const ENOUGH = 2;

/** One flag in shared memory: the worker process sets it, the job's thread polls it. */
export function createCancelFlag(): Int32Array {
  return new Int32Array(new SharedArrayBuffer(Int32Array.BYTES_PER_ELEMENT));
}

export function setCancelFlag(flag: Int32Array): void {
  Atomics.store(flag, 0, CANCELLED);
}

/** Asks for the best so far; a job that was cancelled stays so. */
export function setEnoughFlag(flag: Int32Array): void {
  Atomics.compareExchange(flag, 0, 0, ENOUGH);
}

/** A check to call at the end of steps that could be left out. */
export function isEnoughWhenSet(flag: Int32Array): () => boolean {
  return () => Atomics.load(flag, 0) === ENOUGH;
}

/** A check to call at stage ends and every few thousand iterations; throws `AbortError` once the job was cancelled. */
export function throwWhenSet(flag: Int32Array): () => void {
  return () => {
    if (Atomics.load(flag, 0) === CANCELLED) throw new AbortError();
  };
}
