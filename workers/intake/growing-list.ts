/** Numbers one after another in a typed array that grows. */
export class GrowingList<A extends Float64Array | Uint32Array | Int32Array> {
  length = 0;

  constructor(
    private items: A,
    private readonly make: (length: number) => A,
  ) {}

  push(value: number): void {
    if (this.length === this.items.length) {
      const larger = this.make(Math.max(16, 2 * this.items.length));
      larger.set(this.items);
      this.items = larger;
    }
    this.items[this.length++] = value;
  }

  /** The numbers so far; shares its memory with the list. */
  view(): A {
    return this.items.subarray(0, this.length) as A;
  }
}

export function growingFloats(): GrowingList<Float64Array> {
  return new GrowingList(new Float64Array(1024), (length) => new Float64Array(length));
}

export function growingIndices(): GrowingList<Uint32Array> {
  return new GrowingList(new Uint32Array(1024), (length) => new Uint32Array(length));
}
