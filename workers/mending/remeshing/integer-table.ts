/** A table from whole numbers (0 to 2^53) to whole numbers from 0, by open addressing. */
export class IntegerTable {
  private keys: Float64Array;
  private values: Int32Array;
  private count = 0;

  constructor(expected: number) {
    let size = 16;
    while (size < 2 * expected) size *= 2;
    this.keys = new Float64Array(size).fill(-1);
    this.values = new Int32Array(size);
  }

  get size(): number {
    return this.count;
  }

  /** The value of a key, -1 when it has none. */
  get(key: number): number {
    const { keys } = this;
    const mask = keys.length - 1;
    let slot = hashOf(key) & mask;
    while (keys[slot] >= 0) {
      if (keys[slot] === key) return this.values[slot];
      slot = (slot + 1) & mask;
    }
    return -1;
  }

  set(key: number, value: number): void {
    if (2 * this.count >= this.keys.length) this.grow();
    const mask = this.keys.length - 1;
    let slot = hashOf(key) & mask;
    while (this.keys[slot] >= 0 && this.keys[slot] !== key) slot = (slot + 1) & mask;
    if (this.keys[slot] < 0) this.count++;
    this.keys[slot] = key;
    this.values[slot] = value;
  }

  private grow(): void {
    const { keys, values } = this;
    this.keys = new Float64Array(2 * keys.length).fill(-1);
    this.values = new Int32Array(2 * keys.length);
    this.count = 0;
    for (let slot = 0; slot < keys.length; slot++)
      if (keys[slot] >= 0) this.set(keys[slot], values[slot]);
  }
}

function hashOf(key: number): number {
  const low = (key % 4294967296) | 0;
  const high = (key / 4294967296) | 0;
  let hash = Math.imul(low, 0x9e3779b1) ^ Math.imul(high, 0x85ebca77);
  hash ^= hash >>> 15;
  hash = Math.imul(hash, 0x2c1b3c6d);
  return hash ^ (hash >>> 13);
}
