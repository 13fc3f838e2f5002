import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';

/**
 * The listed triangles as a mesh of their own, with the vertices that they use in the same order.
 * O(n log n) of the triangles listed, however large the mesh is.
 */
export function pickTriangles(mesh: TriangleMesh, triangles: Uint32Array): TriangleMesh {
  const indices = new Uint32Array(3 * triangles.length);
  for (let i = 0; i < indices.length; i++)
    indices[i] = mesh.indices[3 * triangles[(i / 3) | 0] + (i % 3)];
  const sorted = indices.slice().sort();
  const numberOf = new Map<number, number>();
  for (const vertex of sorted) if (!numberOf.has(vertex)) numberOf.set(vertex, numberOf.size);
  const positions = new Float64Array(3 * numberOf.size);
  for (const [vertex, number] of numberOf)
    for (let axis = 0; axis < 3; axis++)
      positions[3 * number + axis] = mesh.positions[3 * vertex + axis];
  for (let i = 0; i < indices.length; i++) indices[i] = numberOf.get(indices[i])!;
  return { positions, indices };
}

/** Several meshes as one, side by side. */
export function joinMeshes(meshes: readonly TriangleMesh[]): TriangleMesh {
  if (meshes.length === 1) return meshes[0];
  const positions = new Float64Array(meshes.reduce((sum, mesh) => sum + mesh.positions.length, 0));
  const indices = new Uint32Array(meshes.reduce((sum, mesh) => sum + mesh.indices.length, 0));
  let vertices = 0;
  let filled = 0;
  for (const mesh of meshes) {
    positions.set(mesh.positions, 3 * vertices);
    for (let i = 0; i < mesh.indices.length; i++) indices[filled + i] = mesh.indices[i] + vertices;
    vertices += mesh.positions.length / 3;
    filled += mesh.indices.length;
  }
  return { positions, indices };
}
