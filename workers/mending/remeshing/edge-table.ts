const fullest = 0.6;

/** Numbers grid edges, or anything with a key below 2³² - 1, in order of first appearance. */
export class EdgeTable {
  /** Keys by number; longer than used. */
  keys: Uint32Array;
  count = 0;
  private slots: Int32Array;

  constructor(expected = 1 << 12) {
    let size = 16;
    while (size * fullest < expected) size *= 2;
    this.slots = new Int32Array(size).fill(-1);
    this.keys = new Uint32Array(Math.ceil(size * fullest) + 1);
  }

  /** The number of a key, or -1. */
  find(key: number): number {
    const { slots, keys } = this;
    const mask = slots.length - 1;
    for (let slot = hashOf(key) & mask; ; slot = (slot + 1) & mask) {
      const number = slots[slot];
      if (number < 0 || keys[number] === key) return number;
    }
  }

  /** The number of a key, a new one when it has none: then it is the `count` of before. */
  add(key: number): number {
    if (this.count >= this.keys.length - 1) this.grow();
    const { slots, keys } = this;
    const mask = slots.length - 1;
    for (let slot = hashOf(key) & mask; ; slot = (slot + 1) & mask) {
      const number = slots[slot];
      if (number >= 0) {
        if (keys[number] === key) return number;
        continue;
      }
      slots[slot] = this.count;
      keys[this.count] = key;
      return this.count++;
    }
  }

  private grow(): void {
    const slots = new Int32Array(2 * this.slots.length).fill(-1);
    const mask = slots.length - 1;
    const keys = new Uint32Array(Math.ceil(slots.length * fullest) + 1);
    keys.set(this.keys.subarray(0, this.count));
    for (let number = 0; number < this.count; number++) {
      let slot = hashOf(keys[number]) & mask;
      while (slots[slot] >= 0) slot = (slot + 1) & mask;
      slots[slot] = number;
    }
    this.slots = slots;
    this.keys = keys;
  }
}

/** The finaliser of Murmur3 (A. Appleby, public domain). */
function hashOf(key: number): number {
  let hash = key;
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b);
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35);
  return (hash ^ (hash >>> 16)) >>> 0;
}
