import type { MeshBVH } from 'three-mesh-bvh';
import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { wallsAt } from '../measuring/wall-thickness.js';

/** Walls measured for the picture. */
const mostRays = 30_000;

/**
 * Wall thickness at the vertices of a mesh that is looked at: measured at the middle of every facet
 * along its own normal, so that a sharp edge does not look askew, then averaged by area. 0 where no ray
 * met a wall. Lengths in the mesh's unit. @param bvh over the solid that `mesh` stands for
 */
export function wallsOfVertices(mesh: TriangleMesh, bvh: MeshBVH): Float32Array {
  const { positions, indices } = mesh;
  const facets = indices.length / 3;
  const points = new Float64Array(3 * facets);
  const normals = new Float64Array(3 * facets);
  const areas = new Float64Array(facets);
  for (let facet = 0; facet < facets; facet++) {
    areas[facet] = facetNormal(positions, indices, 3 * facet, normals, 3 * facet);
    for (let corner = 0; corner < 3; corner++)
      for (let axis = 0; axis < 3; axis++)
        points[3 * facet + axis] += positions[3 * indices[3 * facet + corner] + axis] / 3;
  }
  // Vertices have about six facets: of very many not all have to be measured.
  const stride = Math.ceil(facets / mostRays);
  for (let facet = 0; facet < facets; facet++)
    if (facet % stride !== 0) normals.fill(0, 3 * facet, 3 * facet + 3);
  const thickness = wallsAt(points, normals, bvh);
  const sums = new Float64Array(positions.length / 3);
  const weights = new Float64Array(positions.length / 3);
  for (let i = 0; i < indices.length; i++) {
    const facet = Math.floor(i / 3);
    if (!(thickness[facet] > 0)) continue;
    sums[indices[i]] += thickness[facet] * areas[facet];
    weights[indices[i]] += areas[facet];
  }
  return Float32Array.from(sums, (sum, vertex) =>
    weights[vertex] > 0 ? sum / weights[vertex] : 0,
  );
}
