import { dropUnusedVertices } from '../../../shared/geometry/mesh/compact.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';

/** The listed triangles as a mesh of their own, with the vertices that they use. */
export function pickTriangles(mesh: TriangleMesh, triangles: Uint32Array): TriangleMesh {
  const indices = new Uint32Array(3 * triangles.length);
  triangles.forEach((triangle, i) =>
    indices.set(mesh.indices.subarray(3 * triangle, 3 * triangle + 3), 3 * i),
  );
  return dropUnusedVertices({ positions: mesh.positions, indices });
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
