import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MeshReport } from '../../shared/jobs/model-inspect.js';
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

/** Draws an inspected file: simplified mesh with wall thickness and rims, thumbnail, proxy. */
export async function pictureInspection(
  inspection: Inspection,
  context: JobContext,
): Promise<InspectionPicture> {
  const { shown, bvh, solid, holes, report } = inspection;
  context.progress('Drawing', 0);
  const proxy = await makeProxy(shown, bvh);
  const { mesh, walls } = proxy;
  const scalars = solid && walls ? { name: 'WALL', values: walls } : undefined;
  context.progress('Drawing', 0.65);
  const view = await makeViewGlb({
    meshes: [{ name: 'model', mesh, ...(scalars && { scalars }) }],
    lines: holes.map(({ id, rim }) => ({ name: `hole-${id}`, positions: segmentsOf(rim) })),
    triangleBudget: Infinity,
  });
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
