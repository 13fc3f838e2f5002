import { type BuildSpace } from '../../../shared/geometry/fitting/build-space.js';
import { restingDirections } from '../../../shared/geometry/fitting/candidate-downs.js';
import {
  type ConvexHull,
  convexHull3d,
  cornerPoints,
} from '../../../shared/geometry/fitting/convex-hull-3d.js';
import { poseOn } from '../../../shared/geometry/fitting/lay-on-bed.js';
import { outerVertices } from '../../../shared/geometry/fitting/outer-vertices.js';
import { columnSupport } from '../../../shared/geometry/support/column-support.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { capSides } from '../body-faces.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../../shared/geometry/vectors/plane.js';

/** A body in its own best orientation. */
export interface BodySupport {
  readonly supportMm3: number;
  /** The resting direction, in the assembled frame. */
  readonly down: Vector3;
  /** The first space that holds it so. */
  readonly space: number;
}

export interface SupportTask {
  readonly spaces: readonly BuildSpace[];
  readonly overhangDegrees: number;
  /** Columns across the body's longest side; fewer are faster and coarser. */
  readonly columns: number;
  /** Resting directions looked at closely. */
  readonly tries: number;
}

/** Columns are no finer than that, mm. */
const FINEST_MM = 1;
/** Support below that is none, mm³: no orientation is looked at beyond one that needs so little. */
const NEXT_TO_NOTHING_MM3 = 50;

/**
 * The orientation in which a body fits one of the spaces and needs the least support. All resting
 * directions (cut faces, hull faces, axes) are ranked by an upper bound: every face that leans too
 * far counts down to the plate; the best that fit are measured by columns. Null when none of them
 * fits: the body then lies on a diagonal, or does not fit at all.
 */
export function leastSupport(
  mesh: TriangleMesh,
  task: SupportTask,
  outer: Float64Array = outerVertices(mesh.positions),
  hull: ConvexHull | null = convexHull3d(outer),
): BodySupport | null {
  const { standing, others } = restingDirections(mesh, outer, hull);
  const downs = [...standing, ...others];
  const bounds = supportBounds(mesh, downs, task.overhangDegrees);
  const order = downs.map((_, k) => k).sort((a, b) => bounds[a] - bounds[b] || a - b);
  const corners = cornerPoints(outer, hull);
  const points = corners.length < mesh.positions.length ? corners : mesh.positions;
  let best: BodySupport | null = null;
  let tried = 0;
  for (const k of order) {
    if (tried === task.tries) break;
    const space = task.spaces.findIndex((one) => poseOn(points, one, downs[k])?.fits ?? false);
    if (space < 0) continue;
    tried++;
    const supportMm3 =
      bounds[k] <= NEXT_TO_NOTHING_MM3 ? Math.max(0, bounds[k]) : supportOn(mesh, downs[k], task);
    if (!best || supportMm3 < best.supportMm3) best = { supportMm3, down: downs[k], space };
    if (best.supportMm3 <= NEXT_TO_NOTHING_MM3) break;
  }
  return best;
}

/** Support in one orientation, mm³. */
export function supportOn(
  mesh: TriangleMesh,
  down: Vector3,
  { columns, overhangDegrees }: Pick<SupportTask, 'columns' | 'overhangDegrees'>,
): number {
  const pitchMm = Math.max(FINEST_MM, Math.max(...boundingBox(mesh.positions).size) / columns);
  const up: Vector3 = [0 - down[0], 0 - down[1], 0 - down[2]];
  return columnSupport({ mesh, up, pitchMm, overhangDegrees }).volumeMm3;
}

/**
 * For each resting direction the volume between the faces that lean too far and the plate, mm³: as
 * much as the support can be. O(triangles × directions).
 */
function supportBounds(
  { positions: p, indices, tags }: TriangleMesh,
  downs: readonly Vector3[],
  overhangDegrees: number,
): Float64Array {
  const lean = Math.sin((overhangDegrees * Math.PI) / 180);
  const count = downs.length;
  const flat = Float64Array.from(downs.flat());
  const lowest = new Float64Array(count).fill(-Infinity);
  for (let k = 0; k < p.length; k += 3)
    for (let d = 0, at = 0; d < count; d++, at += 3) {
      const depth = flat[at] * p[k] + flat[at + 1] * p[k + 1] + flat[at + 2] * p[k + 2];
      if (depth > lowest[d]) lowest[d] = depth;
    }
  const volumes = new Float64Array(count);
  const normals = new Float64Array(indices.length);
  for (let t = 0; t < indices.length; t += 3) {
    const a = 3 * indices[t];
    const b = 3 * indices[t + 1];
    const c = 3 * indices[t + 2];
    const ux = p[b] - p[a];
    const uy = p[b + 1] - p[a + 1];
    const uz = p[b + 2] - p[a + 2];
    const vx = p[c] - p[a];
    const vy = p[c + 1] - p[a + 1];
    const vz = p[c + 2] - p[a + 2];
    normals[t] = uy * vz - uz * vy;
    normals[t + 1] = uz * vx - ux * vz;
    normals[t + 2] = ux * vy - uy * vx;
  }
  const sides = capSides(normals, tags);
  for (let t = 0; t < indices.length; t += 3) {
    const a = 3 * indices[t];
    const b = 3 * indices[t + 1];
    const c = 3 * indices[t + 2];
    const nx = normals[t];
    const ny = normals[t + 1];
    const nz = normals[t + 2];
    const side = sides[t / 3];
    const limit = lean * Math.sqrt(nx * nx + ny * ny + nz * nz);
    const mx = (p[a] + p[b] + p[c]) / 3;
    const my = (p[a + 1] + p[b + 1] + p[c + 1]) / 3;
    const mz = (p[a + 2] + p[b + 2] + p[c + 2]) / 3;
    for (let d = 0, at = 0; d < count; d++, at += 3) {
      const facing = nx * flat[at] + ny * flat[at + 1] + nz * flat[at + 2];
      if (side * facing <= limit) continue;
      const depth = flat[at] * mx + flat[at + 1] * my + flat[at + 2] * mz;
      volumes[d] += (facing / 2) * (lowest[d] - depth);
    }
  }
  return volumes;
}
