import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { weldPoints } from '../../shared/geometry/mesh/weld-points.js';

/**
 * Welds an indexed mesh exactly: vertices with equal coordinates (-0 equals 0) become one, triangles
 * with two corners in one vertex are left out and counted, vertices without a triangle are dropped.
 * Vertices keep the order of their first appearance, triangles their order.
 * @param positions flat xyz; @param indices three a triangle, in range
 */
export function weldIndexed(
  positions: Float64Array,
  indices: Uint32Array,
): { mesh: TriangleMesh; degenerateDropped: number } {
  const words = new Int32Array(positions.buffer, positions.byteOffset, 2 * positions.length);
  const welded = weldPoints(words, 6);
  const values = new Float64Array(welded.words.buffer, 0, 3 * welded.count);
  const kept = new Uint32Array(indices.length);
  let filled = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const a = welded.vertexOf[indices[i]];
    const b = welded.vertexOf[indices[i + 1]];
    const c = welded.vertexOf[indices[i + 2]];
    if (a === b || b === c || c === a) continue;
    kept[filled] = a;
    kept[filled + 1] = b;
    kept[filled + 2] = c;
    filled += 3;
  }
  const mesh = { positions: values.slice(), indices: kept.slice(0, filled) };
  return { mesh: dropUnusedVertices(mesh), degenerateDropped: (indices.length - filled) / 3 };
}
