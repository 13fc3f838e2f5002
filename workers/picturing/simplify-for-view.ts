import { MeshoptSimplifier } from 'meshoptimizer';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

export interface ViewMesh {
  readonly positions: Float32Array;
  readonly indices: Uint32Array;
}

/**
 * Allowed distance from the surface as shares of the mesh's extent, tried in turn until the budget is
 * met. The first is about a pixel of a full-screen picture. Own choice.
 */
const allowedErrors = [0.0005, 0.002, 0.01, 0.05];

/** The fewest triangles a mesh is brought down to when a budget is shared: enough to be recognised. */
export const fewestTriangles = 200;

/**
 * A mesh for looking at: float32, at most about `triangles` triangles, as near to the surface as that
 * allows. A mesh within the budget keeps its triangles. Collapses edges (quadric error, meshoptimizer),
 * nothing locked; a mesh that stays over the budget even so is clustered on a grid, which may open it.
 */
export async function simplifyForView(mesh: TriangleMesh, triangles: number): Promise<ViewMesh> {
  const positions = new Float32Array(mesh.positions);
  if (mesh.indices.length / 3 <= triangles) return { positions, indices: mesh.indices };
  await MeshoptSimplifier.ready;
  const wanted = 3 * Math.max(triangles, 1);
  let indices = mesh.indices;
  for (const error of allowedErrors) {
    [indices] = MeshoptSimplifier.simplify(indices, positions, 3, wanted, error);
    if (indices.length <= wanted) return { positions, indices };
  }
  // Many small loose parts: no edge is left that may collapse, so whole parts have to go.
  [indices] = MeshoptSimplifier.simplify(indices, positions, 3, wanted, 1, ['Prune', 'Permissive']);
  if (indices.length > wanted)
    [indices] = MeshoptSimplifier.simplifySloppy(indices, positions, 3, null, wanted, 1);
  return { positions, indices };
}
