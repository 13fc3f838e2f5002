/**
 * The directed edges of triangles, grouped by the smaller of their two vertices, so that every
 * edge meets its partners within one group: linear time, however many triangles share a vertex.
 * Directed edge e runs from corner e to the next corner of triangle floor(e / 3).
 */
export interface EdgeBuckets {
  /** Length vertexCount + 1: the edges of smaller vertex v are bucket[start[v]] .. < start[v + 1]. */
  readonly start: Uint32Array;
  /** Larger vertex × 2, plus 1 when the edge runs from the larger to the smaller. */
  readonly far: Uint32Array;
  /** Directed edge numbers, only when asked for. */
  readonly edge: Uint32Array | null;
  readonly vertexCount: number;
}

/** Groups edges by counting sort, O(triangles); 24 bytes a triangle, 36 with edge numbers. */
export function bucketEdges(indices: Uint32Array, withEdges: boolean): EdgeBuckets {
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
  const edge = withEdges ? new Uint32Array(indices.length) : null;
  // Backwards, so that each group keeps the order of the triangles.
  for (let i = indices.length - 3; i >= 0; i -= 3) {
    for (let corner = 2; corner >= 0; corner--) {
      const from = indices[i + corner];
      const to = indices[corner === 2 ? i : i + corner + 1];
      const slot = from < to ? --start[from] : --start[to];
      far[slot] = from < to ? 2 * to : 2 * from + 1;
      if (edge !== null) edge[slot] = i + corner;
    }
  }
  return { start, far, edge, vertexCount };
}
