/** Share of table slots in use before the table doubles: linear probing stays short below it. */
const FULLEST = 0.6;
const NEGATIVE_ZERO = -0x80000000;

/**
 * Numbers float32 points by the bits of their coordinates as they come: equal points share a number,
 * -0 equals 0, numbers run in order of first appearance. Open addressing, no objects: 12 bytes a
 * distinct point and 7 to 14 for the table.
 */
export class PointWelder {
  /** Bits of the points found so far, three words each; longer than used. */
  words: Int32Array;
  /** How many different points there are. */
  count = 0;
  private capacity: number;
  private table: Int32Array;
  private mask: number;
  private limit: number;

  /** @param expected different points expected; more are taken too */
  constructor(expected: number) {
    this.capacity = Math.max(16, Math.ceil(expected));
    this.words = new Int32Array(3 * this.capacity);
    let size = 16;
    while (size * FULLEST < this.capacity) size *= 2;
    this.table = new Int32Array(size).fill(-1);
    this.mask = size - 1;
    this.limit = Math.floor(size * FULLEST);
  }

  /** The number of the point with these bits. */
  number(x: number, y: number, z: number): number {
    if (x === NEGATIVE_ZERO) x = 0;
    if (y === NEGATIVE_ZERO) y = 0;
    if (z === NEGATIVE_ZERO) z = 0;
    const { table, words, mask } = this;
    let slot = hashOf(x, y, z) & mask;
    for (;;) {
      const point = table[slot];
      if (point < 0) break;
      const at = 3 * point;
      if (words[at] === x && words[at + 1] === y && words[at + 2] === z) return point;
      slot = (slot + 1) & mask;
    }
    return this.add(x, y, z, slot);
  }

  /** The coordinates as doubles, flat xyz; frees the table, so no point can be added any more. */
  finish(): Float64Array {
    this.table = new Int32Array(0);
    const values = new Float32Array(this.words.buffer, 0, 3 * this.count);
    return new Float64Array(values);
  }

  private add(x: number, y: number, z: number, slot: number): number {
    const point = this.count++;
    if (point === this.capacity) this.growWords();
    const at = 3 * point;
    this.words[at] = x;
    this.words[at + 1] = y;
    this.words[at + 2] = z;
    this.table[slot] = point;
    if (this.count > this.limit) this.growTable();
    return point;
  }

  private growWords(): void {
    this.capacity = Math.ceil(this.capacity * 1.5);
    const larger = new Int32Array(3 * this.capacity);
    larger.set(this.words);
    this.words = larger;
  }

  private growTable(): void {
    const { words, count } = this;
    const table = new Int32Array(2 * this.table.length).fill(-1);
    const mask = table.length - 1;
    for (let point = 0; point < count; point++) {
      let slot = hashOf(words[3 * point], words[3 * point + 1], words[3 * point + 2]) & mask;
      while (table[slot] >= 0) slot = (slot + 1) & mask;
      table[slot] = point;
    }
    this.table = table;
    this.mask = mask;
    this.limit = Math.floor(table.length * FULLEST);
  }
}

/** Odd multipliers a coordinate, then the finaliser of Murmur3 (A. Appleby, public domain). */
function hashOf(x: number, y: number, z: number): number {
  let hash = Math.imul(x, 0x9e3779b1) ^ Math.imul(y, 0x85ebca77) ^ Math.imul(z, 0xc2b2ae3d);
  hash ^= hash >>> 16;
  hash = Math.imul(hash, 0x85ebca6b);
  hash ^= hash >>> 13;
  hash = Math.imul(hash, 0xc2b2ae35);
  return hash ^ (hash >>> 16);
}
