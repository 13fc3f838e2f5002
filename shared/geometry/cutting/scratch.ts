/**
 * Working memory kept between cuts: a tree of cuts needs the same arrays at every node, and fresh
 * ones would be cleared and collected each time. What a function returns from here is valid until
 * that function is called again; work on one thread is synchronous, so nothing comes between.
 */
export class Scratch<A extends Uint8Array | Int32Array> {
  private array: A | null = null;

  constructor(private readonly make: (length: number) => A) {}

  /** An array of exactly this length with whatever it held before. */
  take(length: number): A {
    if (this.array === null || this.array.length < length) this.array = this.make(length);
    return this.array.subarray(0, length) as A;
  }
}

export const bytes = (length: number): Uint8Array => new Uint8Array(length);
export const integers = (length: number): Int32Array => new Int32Array(length);
