import type { MeshBVH } from 'three-mesh-bvh';
import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MeshReport } from '../../shared/jobs/model-inspect.js';
import { wallsAt } from '../measuring/wall-thickness.js';
import { makeProxy } from '../picturing/proxy.js';
import { makeViewGlb } from '../picturing/view-glb.js';
import type { JobContext } from '../runtime/job-context.js';
import type { Inspection } from './inspect-file.js';

/** What is shown of an inspected file, and what is planned and cut live with. */
export interface InspectionPicture {
  /** GLB: mesh `model` with the scalar `_WALL` when there is a solid, rims as `hole-<id>`. */
  readonly view: Uint8Array;
  /** PNG. */
  readonly thumbnail: Uint8Array;
  /** The simplified solid; null when it could not be kept closed or there is no solid. */
  readonly proxy: TriangleMesh | null;
  /** The report with its `proxy` filled in. */
  readonly report: MeshReport;
  readonly viewTriangles: number;
}

/** Walls measured for the picture. */
const mostRays = 30_000;

/** Draws an inspected file: simplified mesh with wall thickness and rims, thumbnail, proxy. */
export async function pictureInspection(
  inspection: Inspection,
  context: JobContext,
): Promise<InspectionPicture> {
  const { shown, bvh, solid, holes, report } = inspection;
  context.progress('Drawing', 0);
  const proxy = await makeProxy(shown, bvh);
  context.progress('Drawing', 0.5);
  const { mesh } = proxy;
  const scalars = solid && bvh ? { name: 'WALL', values: wallsOfVertices(mesh, bvh) } : undefined;
  context.progress('Drawing', 0.65);
  const view = await makeViewGlb({
    meshes: [{ name: 'model', mesh, ...(scalars && { scalars }) }],
    lines: holes.map(({ id, rim }) => ({ name: `hole-${id}`, positions: segmentsOf(rim) })),
    triangleBudget: Infinity,
  });
  context.progress('Drawing', 0.85);
  context.progress('Drawing', 1);
  const triangles = mesh.indices.length / 3;
  return {
    view,
    thumbnail: proxy.thumbnail,
    proxy: solid && proxy.isClosed ? mesh : null,
    report: { ...report, proxy: { triangles, deviation: proxy.deviation } },
    viewTriangles: triangles,
  };
}

/**
 * Wall thickness at the vertices of a view mesh: measured at the middle of every facet along its own
 * normal, so that a sharp edge does not look askew, then averaged by area. 0 where no ray met a wall.
 */
function wallsOfVertices(mesh: TriangleMesh, bvh: MeshBVH): Float32Array {
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

/** A closed line as separate segments, two points each. */
function segmentsOf(rim: Float64Array): Float32Array {
  const segments = new Float32Array(2 * rim.length);
  for (let i = 0; i < rim.length; i += 3)
    for (let axis = 0; axis < 3; axis++) {
      segments[2 * i + axis] = rim[i + axis];
      segments[2 * i + 3 + axis] = rim[((i + 3) % rim.length) + axis];
    }
  return segments;
}
