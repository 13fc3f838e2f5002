import { CROWDED, matesOf, nextSide, OPEN } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { pairSides } from './pair-sides.js';

export interface SplitContacts {
  readonly mesh: TriangleMesh;
  /** Edges of more than two triangles that were taken apart. */
  readonly edges: number;
  /** Vertices that joined separate fans of triangles and were taken apart. */
  readonly vertices: number;
  /** Places of split edges, flat xyz; at most 50. */
  readonly at: readonly (readonly [number, number, number])[];
}

const mostPlaces = 50;

/**
 * Takes surfaces apart where they only touch: in an edge that more than two triangles use, and in a
 * vertex where several fans of triangles meet. No point moves. Along a split edge every pair of
 * triangles but the first gets a vertex in between (at fractions of the edge), so that the parts
 * stay apart even when a file without vertex numbers is written and read again.
 * @param mates as `mateEdges` gives them for `mesh`
 */
export function splitContacts(mesh: TriangleMesh, crowded: Int32Array): SplitContacts {
  const paired = pairCrowded(mesh, crowded);
  const refined =
    paired.extra.length > 0 ? addBetween(mesh, paired) : { mesh, mates: paired.mates };
  const fans = separateFans(refined.mesh, refined.mates, paired.ends);
  const vertices = fans.split.filter((vertex) => !paired.ends.has(vertex)).length;
  return { mesh: fans.mesh, edges: paired.edges, vertices, at: paired.at };
}

interface PairedSides {
  readonly mates: Int32Array;
  /** One side of every pair on a split edge but the first, with the fraction where it gets its vertex. */
  readonly extra: readonly { readonly side: number; readonly fraction: number }[];
  readonly edges: number;
  /** Vertices of split edges. */
  readonly ends: ReadonlySet<number>;
  readonly at: readonly (readonly [number, number, number])[];
}

/** Pairs the triangles round every crowded edge; those left over stay open. */
function pairCrowded({ positions, indices }: TriangleMesh, crowded: Int32Array): PairedSides {
  const mates = crowded.slice();
  const byEdge = new Map<string, number[]>();
  for (let side = 0; side < mates.length; side++) {
    if (mates[side] !== CROWDED) continue;
    mates[side] = OPEN;
    const [a, b] = [indices[side], indices[nextSide(side)]];
    const key = a < b ? `${a} ${b}` : `${b} ${a}`;
    const sides = byEdge.get(key);
    if (sides) sides.push(side);
    else byEdge.set(key, [side]);
  }
  const extra: { side: number; fraction: number }[] = [];
  const at: [number, number, number][] = [];
  const ends = new Set<number>();
  for (const sides of byEdge.values()) {
    const pairs = pairSides(positions, indices, sides);
    pairs.forEach(([one, other], number) => {
      mates[one] = other;
      mates[other] = one;
      if (number > 0) extra.push({ side: one, fraction: number / (pairs.length + 1) });
    });
    // One that stays alone must not share its vertices' numbers with a pair either.
    const alone = sides.find((side) => mates[side] === OPEN);
    if (alone !== undefined)
      extra.push({ side: alone, fraction: pairs.length / (pairs.length + 1) });
    ends.add(indices[sides[0]]).add(indices[nextSide(sides[0])]);
    if (at.length < mostPlaces) {
      const [a, b] = [3 * indices[sides[0]], 3 * indices[nextSide(sides[0])]];
      const middle = (axis: number) => (positions[a + axis] + positions[b + axis]) / 2;
      at.push([middle(0), middle(1), middle(2)]);
    }
  }
  return { mates, extra, edges: byEdge.size, ends, at };
}

/** Splits both triangles of each extra pair at a new vertex on their common side, one after another. */
function addBetween(mesh: TriangleMesh, { mates, extra }: PairedSides) {
  const positions = [...mesh.positions];
  const indices = [...mesh.indices];
  const mated = [...mates];
  const moved = new Map<number, number>();
  for (const one of extra) {
    const { fraction } = one;
    let { side } = one;
    // The side may have gone to a triangle that an earlier split added.
    for (let to = moved.get(side); to !== undefined; to = moved.get(side)) side = to;
    const other = mated[side];
    const [a, b] = [indices[side], indices[nextSide(side)]];
    // Counted from the lower number, so that pairs on one edge get different places.
    const share = a < b ? fraction : 1 - fraction;
    const middle = positions.length / 3;
    for (let axis = 0; axis < 3; axis++)
      positions.push(positions[3 * a + axis] * (1 - share) + positions[3 * b + axis] * share);
    const [nearA, nearB] = splitAt(indices, mated, moved, side, middle);
    if (other < 0) continue;
    const [otherFirst, otherSecond] = splitAt(indices, mated, moved, other, middle);
    const isOpposed = indices[otherFirst] !== a;
    mate(mated, nearA, isOpposed ? otherSecond : otherFirst);
    mate(mated, nearB, isOpposed ? otherFirst : otherSecond);
  }
  return {
    mesh: { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) },
    mates: Int32Array.from(mated),
  };
}

/**
 * Splits the triangle of `side` (a→b, apex c) into (a, m, c), in place, and (m, b, c), appended.
 * @returns the sides a→m and m→b
 */
function splitAt(
  indices: number[],
  mated: number[],
  moved: Map<number, number>,
  side: number,
  middle: number,
): [number, number] {
  const second = nextSide(side);
  const third = nextSide(second);
  const [b, c] = [indices[second], indices[third]];
  const added = indices.length;
  indices.push(middle, b, c);
  mated.push(OPEN, OPEN, OPEN);
  moved.set(second, added + 1);
  const beyond = mated[second];
  indices[second] = middle;
  // The side b→c now belongs to the added triangle, and both share m–c.
  if (beyond >= 0) mate(mated, added + 1, beyond);
  else mated[added + 1] = beyond;
  mate(mated, second, added + 2);
  return [side, added];
}

function mate(mated: number[], one: number, other: number): void {
  mated[one] = other;
  mated[other] = one;
}

/**
 * Gives fans of triangles round a vertex a vertex of their own; the first keeps the number. Fans that
 * end in open sides stay together, for a crack that runs through a vertex may be closed yet, but at
 * `ends` every fan is taken apart.
 */
export function separateFans(
  { positions, indices }: TriangleMesh,
  mates: Int32Array,
  ends: ReadonlySet<number> = new Set(),
): { mesh: TriangleMesh; split: number[] } {
  const vertices = positions.length / 3;
  if (hasOneClosedFanEach(indices, mates, vertices))
    return { mesh: { positions, indices }, split: [] };
  const fanOf = findFans(indices, mates);
  // As many fans as vertices in use: none has two.
  if (countFans(fanOf) === countUsed(indices, vertices))
    return { mesh: { positions, indices }, split: [] };
  const isOpen = new Uint8Array(indices.length);
  for (let side = 0; side < mates.length; side++) {
    if (mates[side] >= 0) continue;
    isOpen[fanOf[side]] = 1;
    isOpen[fanOf[nextSide(side)]] = 1;
  }
  const owner = new Int32Array(vertices).fill(-1);
  for (let corner = 0; corner < indices.length; corner++)
    if (isOpen[fanOf[corner]] === 1 && owner[indices[corner]] < 0)
      owner[indices[corner]] = fanOf[corner];
  const separated = indices.slice();
  const added: number[] = [];
  const split = new Set<number>();
  const numberOf = new Map<number, number>();
  for (let corner = 0; corner < indices.length; corner++) {
    const fan = fanOf[corner];
    const vertex = indices[corner];
    if (owner[vertex] < 0) owner[vertex] = fan;
    if (owner[vertex] === fan || (isOpen[fan] === 1 && !ends.has(vertex))) continue;
    let number = numberOf.get(fan);
    if (number === undefined) {
      number = vertices + added.length;
      numberOf.set(fan, number);
      added.push(vertex);
      split.add(vertex);
    }
    separated[corner] = number;
  }
  if (added.length === 0) return { mesh: { positions, indices }, split: [] };
  const moved = new Float64Array(positions.length + 3 * added.length);
  moved.set(positions);
  added.forEach((vertex, i) =>
    moved.set(positions.subarray(3 * vertex, 3 * vertex + 3), positions.length + 3 * i),
  );
  return { mesh: { positions: moved, indices: separated }, split: [...split] };
}

/**
 * Whether every vertex in use has one fan that closes round it, as on a sound closed surface; then no
 * fans need be told apart. False as well where a side is open or runs like its mate.
 */
function hasOneClosedFanEach(indices: Uint32Array, mates: Int32Array, vertices: number): boolean {
  const isSeen = new Uint8Array(vertices);
  let walked = 0;
  for (let corner = 0; corner < indices.length; corner++) {
    const vertex = indices[corner];
    if (isSeen[vertex] === 1) continue;
    isSeen[vertex] = 1;
    let side = corner;
    do {
      const mate = mates[side];
      if (mate < 0 || indices[mate] === vertex) return false;
      side = nextSide(mate);
      walked++;
    } while (side !== corner);
  }
  return walked === indices.length;
}

function countFans(fanOf: Int32Array): number {
  let fans = 0;
  for (let corner = 0; corner < fanOf.length; corner++) if (fanOf[corner] === corner) fans++;
  return fans;
}

function countUsed(indices: Uint32Array, vertices: number): number {
  const isUsed = new Uint8Array(vertices);
  let used = 0;
  for (let i = 0; i < indices.length; i++) {
    if (isUsed[indices[i]] === 1) continue;
    isUsed[indices[i]] = 1;
    used++;
  }
  return used;
}

/** For every corner the first corner of its fan: of those joined by mated sides round one vertex. */
function findFans(indices: Uint32Array, mates: Int32Array): Int32Array {
  const parent = new Int32Array(indices.length);
  for (let corner = 0; corner < parent.length; corner++) parent[corner] = corner;
  for (let side = 0; side < mates.length; side++) {
    const other = mates[side];
    if (other < side) continue;
    const isOpposed = indices[side] !== indices[other];
    unite(parent, side, isOpposed ? nextSide(other) : other);
    unite(parent, nextSide(side), isOpposed ? other : nextSide(other));
  }
  for (let corner = 0; corner < parent.length; corner++) parent[corner] = findRoot(parent, corner);
  return parent;
}

function unite(parent: Int32Array, a: number, b: number): void {
  const [x, y] = [findRoot(parent, a), findRoot(parent, b)];
  if (x < y) parent[y] = x;
  else parent[x] = y;
}

function findRoot(parent: Int32Array, at: number): number {
  while (parent[at] !== at) {
    parent[at] = parent[parent[at]];
    at = parent[at];
  }
  return at;
}

/** `splitContacts` on a mesh whose sides are not mated yet. */
export function splitAllContacts(mesh: TriangleMesh): SplitContacts {
  return splitContacts(mesh, matesOf(mesh).mates);
}
