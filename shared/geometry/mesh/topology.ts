import { bucketEdges } from './edge-buckets.js';

export interface EdgeReport {
  /** Edges used by one triangle only. */
  readonly openEdges: number;
  /** Edges used by more than two triangles. */
  readonly nonManifoldEdges: number;
  /** Edges whose two triangles run the same way. */
  readonly misorientedEdges: number;
  /** Whether every directed edge occurs exactly once and its opposite exactly once. */
  readonly closed: boolean;
}

/**
 * Counts the edges that keep a mesh from being a closed, consistently oriented surface. A triangle
 * that names a vertex twice counts its empty edge as used wrongly. An empty mesh is closed.
 * O(triangles).
 */
export function edgeReport(mesh: { readonly indices: Uint32Array }): EdgeReport {
  const { start, far, vertexCount } = bucketEdges(mesh.indices, false);
  const forward = new Int32Array(vertexCount);
  const backward = new Int32Array(vertexCount);
  let openEdges = 0;
  let nonManifoldEdges = 0;
  let misorientedEdges = 0;
  for (let vertex = 0; vertex < vertexCount; vertex++) {
    const from = start[vertex];
    const to = start[vertex + 1];
    for (let i = from; i < to; i++) {
      const packed = far[i];
      if ((packed & 1) === 0) forward[packed >>> 1]++;
      else backward[packed >>> 1]++;
    }
    for (let i = from; i < to; i++) {
      const other = far[i] >>> 1;
      const f = forward[other];
      const b = backward[other];
      if (f === 0 && b === 0) continue;
      forward[other] = 0;
      backward[other] = 0;
      if (f === 1 && b === 1 && other !== vertex) continue;
      if (f + b === 1) openEdges++;
      else if (f + b === 2) misorientedEdges++;
      else nonManifoldEdges++;
    }
  }
  const closed = openEdges + nonManifoldEdges + misorientedEdges === 0;
  return { openEdges, nonManifoldEdges, misorientedEdges, closed };
}

/**
 * Number of triangles that repeat an earlier one: the same three vertices, whatever the order or
 * the orientation. O(triangles).
 */
export function duplicateFacets(mesh: { readonly indices: Uint32Array }): number {
  const { indices } = mesh;
  const triangles = indices.length / 3;
  let size = 16;
  while (size < 2 * triangles) size *= 2;
  const table = new Int32Array(size).fill(-1);
  let repeated = 0;
  for (let triangle = 0; triangle < triangles; triangle++) {
    let slot = hashCorners(indices, triangle) & (size - 1);
    while (table[slot] >= 0 && !sameCorners(indices, table[slot], triangle)) {
      slot = (slot + 1) & (size - 1);
    }
    if (table[slot] >= 0) repeated++;
    else table[slot] = triangle;
  }
  return repeated;
}

/** A hash of a triangle's three vertices that does not depend on their order. */
export function hashCorners(indices: Uint32Array, triangle: number): number {
  const a = indices[3 * triangle];
  const b = indices[3 * triangle + 1];
  const c = indices[3 * triangle + 2];
  let hash = Math.imul(a + b + c, 0x9e3779b1) ^ Math.imul(a ^ b ^ c, 0x85ebca6b);
  hash ^= Math.imul(Math.imul(a + 1, b + 1), c + 1);
  return (hash ^ (hash >>> 15)) >>> 0;
}

/** Whether two triangles use the same three vertices, in any order. */
export function sameCorners(indices: Uint32Array, one: number, other: number): boolean {
  const a = indices[3 * one];
  const b = indices[3 * one + 1];
  const c = indices[3 * one + 2];
  const d = indices[3 * other];
  const e = indices[3 * other + 1];
  const f = indices[3 * other + 2];
  return (
    (a === d && ((b === e && c === f) || (b === f && c === e))) ||
    (a === e && ((b === d && c === f) || (b === f && c === d))) ||
    (a === f && ((b === d && c === e) || (b === e && c === d)))
  );
}
