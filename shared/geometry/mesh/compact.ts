import { type TriangleMesh } from './triangle-mesh.js';

/**
 * The same triangles without the vertices that none of them uses; the order of the vertices
 * stays. Returns the mesh itself when all are used.
 */
export function dropUnusedVertices(mesh: TriangleMesh): TriangleMesh {
  const { positions, indices } = mesh;
  const vertices = positions.length / 3;
  const numberOf = new Int32Array(vertices).fill(-1);
  for (let i = 0; i < indices.length; i++) numberOf[indices[i]] = 0;
  let used = 0;
  for (let vertex = 0; vertex < vertices; vertex++) {
    if (numberOf[vertex] === 0) numberOf[vertex] = used++;
  }
  if (used === vertices) return mesh;
  const packed = new Float64Array(used * 3);
  for (let vertex = 0; vertex < vertices; vertex++) {
    if (numberOf[vertex] < 0) continue;
    const to = 3 * numberOf[vertex];
    packed[to] = positions[3 * vertex];
    packed[to + 1] = positions[3 * vertex + 1];
    packed[to + 2] = positions[3 * vertex + 2];
  }
  const renumbered = new Uint32Array(indices.length);
  for (let i = 0; i < indices.length; i++) renumbered[i] = numberOf[indices[i]];
  return { ...mesh, positions: packed, indices: renumbered };
}
