/**
 * The directed edges of triangles, grouped by the smaller of their two vertices, so that every
 * edge meets its partners within one group: linear time, however many triangles share a vertex.
 */
export interface EdgeBuckets {
  /** Length vertexCount + 1: the edges of smaller vertex v are bucket[start[v]] .. < start[v + 1]. */
  readonly start: Uint32Array;
  /** Larger vertex × 2, plus 1 when the edge runs from the larger to the smaller. */
  readonly far: Uint32Array;
  /** Triangle of each edge, only when asked for. */
  readonly triangle: Uint32Array | null;
  readonly vertexCount: number;
}

/** Groups edges by counting sort, O(triangles); 24 bytes a triangle, 36 with triangles. */
export function bucketEdges(indices: Uint32Array, withTriangles: boolean): EdgeBuckets {
  let last = -1;
  for (let i = 0; i < indices.length; i++) if (indices[i] > last) last = indices[i];
  const vertexCount = last + 1;
  const start = new Uint32Array(vertexCount + 1);
  for (let i = 0; i < indices.length; i += 3) {
    const a = indices[i];
    const b = indices[i + 1];
    const c = indices[i + 2];
    start[a < b ? a : b]++;
    start[b < c ? b : c]++;
    start[c < a ? c : a]++;
  }
  let sum = 0;
  for (let vertex = 0; vertex <= vertexCount; vertex++) {
    sum += start[vertex];
    start[vertex] = sum;
  }
  const far = new Uint32Array(indices.length);
  const triangle = withTriangles ? new Uint32Array(indices.length) : null;
  // Backwards, so that each group keeps the order of the triangles.
  for (let t = indices.length / 3 - 1, i = 3 * t; t >= 0; t--, i -= 3) {
    const a = indices[i];
    const b = indices[i + 1];
    const c = indices[i + 2];
    const last = c < a ? --start[c] : --start[a];
    far[last] = c < a ? 2 * a : 2 * c + 1;
    const middle = b < c ? --start[b] : --start[c];
    far[middle] = b < c ? 2 * c : 2 * b + 1;
    const first = a < b ? --start[a] : --start[b];
    far[first] = a < b ? 2 * b : 2 * a + 1;
    if (triangle === null) continue;
    triangle[last] = t;
    triangle[middle] = t;
    triangle[first] = t;
  }
  return { start, far, triangle, vertexCount };
}
