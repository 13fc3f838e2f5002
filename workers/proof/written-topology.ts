/** The proof's own hash-based topology: it must not share code with what it checks. */

const EMPTY = -1;

/** Corner numbers with equal coordinates get equal numbers; −0 equals 0. Length 3 × facets. */
export function identifyCorners(corners: Float32Array): { ids: Int32Array; distinct: number } {
  const cornerCount = corners.length / 3;
  const ids = new Int32Array(cornerCount);
  const mask = tableMask(cornerCount);
  const table = new Int32Array(mask + 1).fill(EMPTY);
  const firstCorner = new Int32Array(cornerCount);
  const scratch = new Float32Array(3);
  const bits = new Int32Array(scratch.buffer);
  let distinct = 0;
  for (let corner = 0; corner < cornerCount; corner++) {
    // Adding 0 turns −0 into 0, so that equal numbers have equal bits.
    const x = corners[3 * corner] + 0;
    const y = corners[3 * corner + 1] + 0;
    const z = corners[3 * corner + 2] + 0;
    scratch[0] = x;
    scratch[1] = y;
    scratch[2] = z;
    let slot = mix(mix(mix(0x2f6e2b1, bits[0]), bits[1]), bits[2]) & mask;
    let id = table[slot];
    while (id !== EMPTY) {
      const at = 3 * firstCorner[id];
      if (corners[at] === x && corners[at + 1] === y && corners[at + 2] === z) break;
      slot = (slot + 1) & mask;
      id = table[slot];
    }
    if (id === EMPTY) {
      id = distinct++;
      table[slot] = id;
      firstCorner[id] = corner;
    }
    ids[corner] = id;
  }
  return { ids, distinct };
}

export interface WrittenTopology {
  /** Facets with two equal corners: they have no area and join nothing. */
  collapsed: number;
  /** Directed edges that no facet runs the other way. */
  open: number;
  /** Directed edges that a second facet runs the same way: doubled or wrongly turned. */
  repeated: number;
  /** For each facet, the number of the connected surface it belongs to, 0 … surfaces − 1. */
  surfaceOf: Int32Array;
  surfaces: number;
}

/**
 * Checks that every directed edge is used once and its opposite once, and finds the connected
 * surfaces (joined by whole edges; touching at a point does not join).
 * @param ids corner numbers of {@link identifyCorners}, 3 a facet
 */
export function writtenTopology(ids: Int32Array): WrittenTopology {
  const edgeCount = ids.length;
  const facets = edgeCount / 3;
  const mask = tableMask(edgeCount);
  const table = new Int32Array(mask + 1).fill(EMPTY);
  let collapsed = 0;
  let repeated = 0;
  for (let edge = 0; edge < edgeCount; edge++) {
    const to = ids[following(edge)];
    let slot = mix(mix(0x51ed27, ids[edge]), to) & mask;
    while (table[slot] !== EMPTY) {
      const other = table[slot];
      if (ids[other] === ids[edge] && ids[following(other)] === to) {
        repeated++;
        break;
      }
      slot = (slot + 1) & mask;
    }
    if (table[slot] === EMPTY) table[slot] = edge;
    if (edge % 3 === 0 && isCollapsed(ids, edge)) collapsed++;
  }

  const parent = new Int32Array(facets);
  for (let facet = 0; facet < facets; facet++) parent[facet] = facet;
  let open = 0;
  for (let edge = 0; edge < edgeCount; edge++) {
    const from = ids[following(edge)];
    const to = ids[edge];
    let slot = mix(mix(0x51ed27, from), to) & mask;
    let other = table[slot];
    while (other !== EMPTY && !(ids[other] === from && ids[following(other)] === to)) {
      slot = (slot + 1) & mask;
      other = table[slot];
    }
    if (other === EMPTY) open++;
    else unite(parent, Math.floor(edge / 3), Math.floor(other / 3));
  }
  const { surfaceOf, surfaces } = numberRoots(parent);
  return { collapsed, open, repeated, surfaceOf, surfaces };
}

function following(edge: number): number {
  return edge % 3 === 2 ? edge - 2 : edge + 1;
}

function isCollapsed(ids: Int32Array, first: number): boolean {
  const a = ids[first];
  const b = ids[first + 1];
  const c = ids[first + 2];
  return a === b || b === c || c === a;
}

function numberRoots(parent: Int32Array): { surfaceOf: Int32Array; surfaces: number } {
  const surfaceOf = new Int32Array(parent.length).fill(EMPTY);
  let surfaces = 0;
  for (let facet = 0; facet < parent.length; facet++) {
    const root = rootOf(parent, facet);
    if (surfaceOf[root] === EMPTY) surfaceOf[root] = surfaces++;
    surfaceOf[facet] = surfaceOf[root];
  }
  return { surfaceOf, surfaces };
}

function rootOf(parent: Int32Array, facet: number): number {
  while (parent[facet] !== facet) {
    parent[facet] = parent[parent[facet]];
    facet = parent[facet];
  }
  return facet;
}

function unite(parent: Int32Array, a: number, b: number): void {
  const rootA = rootOf(parent, a);
  const rootB = rootOf(parent, b);
  // The smaller number stays the root: a root is met before its members when numbering.
  if (rootA < rootB) parent[rootB] = rootA;
  else parent[rootA] = rootB;
}

/** Slots − 1 of a power-of-two table at most half full. */
function tableMask(entries: number): number {
  let slots = 16;
  while (slots < 2 * entries) slots *= 2;
  return slots - 1;
}

function mix(hash: number, value: number): number {
  let h = Math.imul(hash ^ value, 0x9e3779b1);
  h ^= h >>> 15;
  return Math.imul(h, 0x85ebca6b) ^ (h >>> 13);
}
