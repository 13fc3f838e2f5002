/** How the triangles of a mesh meet in their edges. Side s of triangle t runs from its corner s to the next one. */
export interface EdgeMates {
  /** For side 3·t + s the side on the other triangle, `OPEN` or `CROWDED`. */
  readonly mates: Int32Array;
  /** Edges used by one triangle only. */
  readonly openEdges: number;
  /** Edges used by more than two triangles. */
  readonly nonManifoldEdges: number;
  /** Edges whose two triangles run the same way. */
  readonly misorientedEdges: number;
  /** Whether every edge is used exactly once each way. */
  readonly closed: boolean;
}

/** A side with no other triangle. */
export const OPEN = -1;
/** A side of an edge that more than two triangles use. */
export const CROWDED = -2;

/**
 * Finds for every side of every triangle the side it shares its edge with. No triangle may name a
 * vertex twice. One pass with a short list a vertex: O(triangles), 36 bytes a triangle.
 */
export function mateEdges(indices: Uint32Array): EdgeMates {
  const sides = indices.length;
  let last = -1;
  for (let i = 0; i < sides; i++) if (indices[i] > last) last = indices[i];
  // First sides of edges, listed by their lower vertex.
  const head = new Int32Array(last + 1).fill(OPEN);
  const next = new Int32Array(sides);
  const far = new Uint32Array(sides);
  const mates = new Int32Array(sides).fill(OPEN);
  let edges = 0;
  let mated = 0;
  let nonManifoldEdges = 0;
  let misorientedEdges = 0;
  for (let side = 0; side < sides; side++) {
    const from = indices[side];
    const to = indices[side % 3 === 2 ? side - 2 : side + 1];
    const low = from < to ? from : to;
    const high = from < to ? to : from;
    let other = head[low];
    while (other >= 0 && far[other] !== high) other = next[other];
    if (other < 0) {
      far[side] = high;
      next[side] = head[low];
      head[low] = side;
      edges++;
      continue;
    }
    const partner = mates[other];
    if (partner === OPEN) {
      mates[other] = side;
      mates[side] = other;
      mated++;
      if (indices[other] === from) misorientedEdges++;
      continue;
    }
    mates[side] = CROWDED;
    if (partner === CROWDED) continue;
    if (indices[other] === indices[partner]) misorientedEdges--;
    mates[other] = CROWDED;
    mates[partner] = CROWDED;
    nonManifoldEdges++;
    mated--;
  }
  const openEdges = edges - mated - nonManifoldEdges;
  const closed = openEdges + nonManifoldEdges + misorientedEdges === 0;
  return { mates, openEdges, nonManifoldEdges, misorientedEdges, closed };
}

/**
 * Groups triangles that hang together by mated sides. Triangles that meet in an open or crowded edge
 * or in a vertex only stay apart. Groups are numbered in order of their first triangle.
 */
export function groupByMates(mates: Int32Array): { labels: Int32Array; count: number } {
  const triangles = mates.length / 3;
  const labels = new Int32Array(triangles).fill(-1);
  const queue = new Int32Array(triangles);
  let count = 0;
  for (let first = 0; first < triangles; first++) {
    if (labels[first] >= 0) continue;
    labels[first] = count;
    let end = 0;
    queue[end++] = first;
    for (let at = 0; at < end; at++) {
      const side = 3 * queue[at];
      for (let k = 0; k < 3; k++) {
        const mate = mates[side + k];
        if (mate < 0) continue;
        const triangle = (mate / 3) | 0;
        if (labels[triangle] >= 0) continue;
        labels[triangle] = count;
        queue[end++] = triangle;
      }
    }
    count++;
  }
  return { labels, count };
}

/** The side after this one in the same triangle. */
export function nextSide(side: number): number {
  return side % 3 === 2 ? side - 2 : side + 1;
}

const known = new WeakMap<object, EdgeMates>();
const knownGroups = new WeakMap<object, { labels: Int32Array; count: number }>();

/** `mateEdges` of a mesh that nobody changes any more: found once, kept as long as the mesh. */
export function matesOf(mesh: { readonly indices: Uint32Array }): EdgeMates {
  let mates = known.get(mesh);
  if (!mates) known.set(mesh, (mates = mateEdges(mesh.indices)));
  return mates;
}

/** `groupByMates` of such a mesh, kept likewise. */
export function surfacesOf(mesh: { readonly indices: Uint32Array }) {
  let groups = knownGroups.get(mesh);
  if (!groups) knownGroups.set(mesh, (groups = groupByMates(matesOf(mesh).mates)));
  return groups;
}
