import { facetArea } from '../../shared/geometry/mesh/facet-normal.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** Points spread evenly by area over a surface. */
export interface SurfaceSamples {
  readonly count: number;
  /** Flat xyz. */
  readonly points: Float64Array;
  /** Triangle that each point lies on. */
  readonly triangles: Uint32Array;
}

/** The fractional parts of multiples of these fill a square evenly: M. Roberts, "The unreasonable
 *  effectiveness of quasirandom sequences", 2018 (the plastic number's powers). */
const firstShare = 0.7548776662466927;
const secondShare = 0.5698402909980532;

/**
 * Spreads points over the surface: equal steps of area along the list of triangles, places within a
 * triangle by a low-discrepancy sequence. The same mesh gives the same points. Triangles without
 * area get none; a mesh without area gives no points.
 */
export function sampleSurface(mesh: TriangleMesh, wanted: number): SurfaceSamples {
  const { positions, indices } = mesh;
  const triangleCount = indices.length / 3;
  const reached = areasReached(mesh);
  const sum = triangleCount > 0 ? reached[triangleCount - 1] : 0;
  const count = sum > 0 && Number.isFinite(sum) ? wanted : 0;
  const points = new Float64Array(3 * count);
  const triangles = new Uint32Array(count);
  let triangle = 0;
  for (let i = 0; i < count; i++) {
    const along = ((i + 0.5) / count) * sum;
    while (triangle < triangleCount - 1 && reached[triangle] < along) triangle++;
    let u = (0.5 + firstShare * (i + 1)) % 1;
    let v = (0.5 + secondShare * (i + 1)) % 1;
    if (u + v > 1) {
      u = 1 - u;
      v = 1 - v;
    }
    const a = 3 * indices[3 * triangle];
    const b = 3 * indices[3 * triangle + 1];
    const c = 3 * indices[3 * triangle + 2];
    for (let axis = 0; axis < 3; axis++) {
      const start = positions[a + axis];
      points[3 * i + axis] =
        start + u * (positions[b + axis] - start) + v * (positions[c + axis] - start);
    }
    triangles[i] = triangle;
  }
  return { count, points, triangles };
}

const known = new WeakMap<TriangleMesh, Float64Array>();

/** Area of the triangles up to each one; kept as long as the mesh, which nobody changes any more. */
function areasReached(mesh: TriangleMesh): Float64Array {
  const before = known.get(mesh);
  if (before) return before;
  const reached = new Float64Array(mesh.indices.length / 3);
  let sum = 0;
  for (let triangle = 0; triangle < reached.length; triangle++) {
    sum += facetArea(mesh.positions, mesh.indices, 3 * triangle);
    reached[triangle] = sum;
  }
  known.set(mesh, reached);
  return reached;
}
