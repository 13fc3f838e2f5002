/** What is kept at most between two uses, bytes: enough for 1.7 million triangles. Own choice. */
const mostKept = 2 ** 28;

let kept = new ArrayBuffer(0);

/**
 * Room for the arrays of one synchronous piece of work, kept for the next one: touching fresh memory
 * for the first time can cost more than what is done in it. Opening a workspace ends the one before,
 * so nothing of it may be returned or outlive its function. What it holds at first is left over, not
 * zeros. Throws a RangeError when more is taken than was asked for.
 */
export class Workspace {
  private readonly buffer: ArrayBuffer;
  private used = 0;

  /** @param bytes for all arrays together, each rounded up to a multiple of eight */
  constructor(bytes: number) {
    this.buffer = kept.byteLength >= bytes ? kept : new ArrayBuffer(bytes);
    if (bytes <= mostKept) kept = this.buffer;
  }

  doubles(length: number): Float64Array {
    return new Float64Array(this.buffer, this.take(8 * length), length);
  }

  floats(length: number): Float32Array {
    return new Float32Array(this.buffer, this.take(4 * length), length);
  }

  naturals(length: number): Uint32Array {
    return new Uint32Array(this.buffer, this.take(4 * length), length);
  }

  private take(bytes: number): number {
    const from = this.used;
    this.used += 8 * Math.ceil(bytes / 8);
    return from;
  }
}
