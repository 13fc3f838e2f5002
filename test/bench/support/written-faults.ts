import { bucketEdges } from '../../../shared/geometry/mesh/edge-buckets.js';
import { signedVolume } from '../../../shared/geometry/mesh/measure.js';
import { weldTriangles } from '../../../shared/geometry/mesh/weld.js';

/** What is left of pieces after a float32 round trip: weld of the rounded corners. */
export interface WrittenFaults {
  /** Directed edges without an opposite partner. */
  readonly openHalfEdges: number;
  readonly volumeMm3: number;
  readonly triangles: number;
}

export function inspectSoups(soups: readonly Float32Array[]): WrittenFaults {
  let openHalfEdges = 0;
  let volumeMm3 = 0;
  let triangles = 0;
  for (const soup of soups) {
    const { mesh } = weldTriangles(soup);
    openHalfEdges += countOpenHalfEdges(mesh.indices);
    volumeMm3 += mesh.indices.length > 0 ? signedVolume(mesh) : 0;
    triangles += mesh.indices.length / 3;
  }
  return { openHalfEdges, volumeMm3, triangles };
}

function countOpenHalfEdges(indices: Uint32Array): number {
  const { start, far, vertexCount } = bucketEdges(indices, false);
  const balance = new Int32Array(vertexCount);
  let open = 0;
  for (let vertex = 0; vertex < vertexCount; vertex++) {
    const end = start[vertex + 1]!;
    for (let i = start[vertex]!; i < end; i++) balance[far[i]! >>> 1]! += far[i]! & 1 ? -1 : 1;
    for (let i = start[vertex]!; i < end; i++) {
      open += Math.abs(balance[far[i]! >>> 1]!);
      balance[far[i]! >>> 1] = 0;
    }
  }
  return open;
}
