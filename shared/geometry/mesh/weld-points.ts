/** Which vertex each point became, and the bits of the vertices. */
export interface WeldedPoints {
  /** Vertex number of each point, in order of first appearance. */
  readonly vertexOf: Uint32Array;
  /** Bits of the vertices, `stride` words each, longer than used; -0 is stored as 0. */
  readonly words: Int32Array;
  readonly count: number;
}

/** Points between two calls of onProgress. */
const PROGRESS_STEP = 1 << 18;
/** Share of table slots in use before the table doubles: linear probing stays short below it. */
const FULLEST = 0.6;
const NEGATIVE_ZERO = -0x80000000;

/**
 * Numbers points so that points with equal coordinates share a number, -0 and 0 being equal.
 * @param words bits of the coordinates: 3 words a point for float32 xyz, 6 for float64 xyz
 * @param stride 3 or 6
 * Open addressing on the bits, no objects. Beside the result it needs 4 bytes a table slot, at
 * most 14 bytes a distinct vertex. Non-finite values are compared by their bits like all others.
 */
export function weldPoints(
  words: Int32Array,
  stride: 3 | 6,
  onProgress?: (fraction: number) => void,
): WeldedPoints {
  const points = words.length / stride;
  const vertexOf = new Uint32Array(points);
  // A closed mesh has about one vertex for six corners.
  let capacity = Math.max(16, Math.ceil(points / 5.5));
  let vertices = new Int32Array(capacity * stride);
  let table = makeTable(capacity);
  let mask = table.length - 1;
  let limit = Math.floor(table.length * FULLEST);
  let count = 0;
  for (let point = 0; point < points; point++) {
    const at = point * stride;
    if (point % PROGRESS_STEP === 0) onProgress?.(point / points);
    let slot = hashWords(words, at, stride) & mask;
    for (;;) {
      const vertex = table[slot];
      if (vertex < 0) {
        if (count === capacity) {
          capacity = Math.ceil(capacity * 1.5);
          const larger = new Int32Array(capacity * stride);
          larger.set(vertices);
          vertices = larger;
        }
        copyWords(words, at, vertices, count * stride, stride);
        table[slot] = count;
        vertexOf[point] = count++;
        if (count > limit) {
          table = rehash(vertices, stride, count, table.length * 2);
          mask = table.length - 1;
          limit = Math.floor(table.length * FULLEST);
        }
        break;
      }
      if (sameWords(words, at, vertices, vertex * stride, stride)) {
        vertexOf[point] = vertex;
        break;
      }
      slot = (slot + 1) & mask;
    }
  }
  return { vertexOf, words: vertices, count };
}

function makeTable(expected: number): Int32Array {
  let size = 16;
  while (size * FULLEST < expected) size *= 2;
  return new Int32Array(size).fill(-1);
}

function rehash(vertices: Int32Array, stride: 3 | 6, count: number, size: number): Int32Array {
  const table = new Int32Array(size).fill(-1);
  const mask = size - 1;
  for (let vertex = 0; vertex < count; vertex++) {
    let slot = hashWords(vertices, vertex * stride, stride) & mask;
    while (table[slot] >= 0) slot = (slot + 1) & mask;
    table[slot] = vertex;
  }
  return table;
}

/** Murmur3 (A. Appleby, public domain) over the words, with -0 read as 0. */
function hashWords(words: Int32Array, at: number, stride: 3 | 6): number {
  let hash = 0;
  for (let k = 0; k < stride; k++) {
    let word = words[at + k];
    if (word === NEGATIVE_ZERO && isZero(words, at, k, stride)) word = 0;
    word = Math.imul(word, 0xcc9e2d51);
    word = (word << 15) | (word >>> 17);
    hash ^= Math.imul(word, 0x1b873593);
    hash = (hash << 13) | (hash >>> 19);
    hash = (Math.imul(hash, 5) + 0xe6546b64) | 0;
  }
  hash ^= hash >>> 16;
  hash = Math.imul(hash, 0x85ebca6b);
  hash ^= hash >>> 13;
  hash = Math.imul(hash, 0xc2b2ae35);
  return hash ^ (hash >>> 16);
}

/** Whether the sign word at k belongs to a zero: always for float32, by its low word for float64. */
function isZero(words: Int32Array, at: number, k: number, stride: 3 | 6): boolean {
  return stride === 3 || ((k & 1) === 1 && words[at + k - 1] === 0);
}

function sameWords(a: Int32Array, i: number, b: Int32Array, j: number, stride: 3 | 6): boolean {
  for (let k = 0; k < stride; k++) {
    const word = a[i + k];
    if (word !== b[j + k]) {
      // b holds stored vertices, whose zeros are all positive.
      if (word !== NEGATIVE_ZERO || b[j + k] !== 0 || !isZero(a, i, k, stride)) return false;
    }
  }
  return true;
}

function copyWords(a: Int32Array, i: number, b: Int32Array, j: number, stride: 3 | 6): void {
  for (let k = 0; k < stride; k++) {
    const word = a[i + k];
    b[j + k] = word === NEGATIVE_ZERO && isZero(a, i, k, stride) ? 0 : word;
  }
}
