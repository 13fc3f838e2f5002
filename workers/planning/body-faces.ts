import { type SurfaceWorth, worthOfTag } from './judging/surface-worth.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A body's triangles laid out for sweeping, once for all directions. */
export interface BodyFaces {
  /** Corner coordinates, 9 a triangle, mm. */
  readonly corners: Float64Array;
  /** Normal times area, 3 a triangle, mm². */
  readonly halfNormals: Float64Array;
  /** mm², one a triangle. */
  readonly areas: Float64Array;
  readonly surfaceMm2: number;
  /**
   * 1, or −1 for a triangle of a trial cap that faces against its cap: it takes away what others of
   * the cap have too much.
   */
  readonly sides: Int8Array;
  /** What a seam costs there, one a triangle: see SurfaceWorth. */
  readonly worth: Float32Array;
}

export function bodyFaces(
  { positions: p, indices, tags }: TriangleMesh,
  surface: SurfaceWorth,
): BodyFaces {
  const triangles = indices.length / 3;
  const corners = new Float64Array(9 * triangles);
  const halfNormals = new Float64Array(3 * triangles);
  const areas = new Float64Array(triangles);
  let surfaceMm2 = 0;
  for (let t = 0, c = 0; t < triangles; t++) {
    const at = c;
    for (let corner = 0; corner < 3; corner++) {
      const from = 3 * indices[3 * t + corner];
      corners[c++] = p[from];
      corners[c++] = p[from + 1];
      corners[c++] = p[from + 2];
    }
    const ux = corners[at + 3] - corners[at];
    const uy = corners[at + 4] - corners[at + 1];
    const uz = corners[at + 5] - corners[at + 2];
    const vx = corners[at + 6] - corners[at];
    const vy = corners[at + 7] - corners[at + 1];
    const vz = corners[at + 8] - corners[at + 2];
    const nx = (uy * vz - uz * vy) / 2;
    const ny = (uz * vx - ux * vz) / 2;
    const nz = (ux * vy - uy * vx) / 2;
    halfNormals[3 * t] = nx;
    halfNormals[3 * t + 1] = ny;
    halfNormals[3 * t + 2] = nz;
    areas[t] = Math.sqrt(nx * nx + ny * ny + nz * nz);
    surfaceMm2 += areas[t];
  }
  const worth = Float32Array.from({ length: triangles }, (_, t) =>
    worthOfTag(surface, tags ? tags[t] : 0),
  );
  const sides = capSides(halfNormals, tags);
  return { corners, halfNormals, areas, surfaceMm2, sides, worth };
}

/** Which triangles of caps face against the sum of their cap. */
export function capSides(normals: Float64Array, tags: Int32Array | undefined): Int8Array {
  const sides = new Int8Array(normals.length / 3).fill(1);
  if (!tags) return sides;
  const sums = new Map<number, [number, number, number]>();
  for (let t = 0; t < tags.length; t++) {
    if (tags[t] <= 0) continue;
    const sum = sums.get(tags[t]);
    if (!sum) sums.set(tags[t], [normals[3 * t], normals[3 * t + 1], normals[3 * t + 2]]);
    else for (let axis = 0; axis < 3; axis++) sum[axis] += normals[3 * t + axis];
  }
  for (let t = 0; t < tags.length; t++) {
    const sum = tags[t] > 0 ? sums.get(tags[t]) : undefined;
    if (!sum) continue;
    const facing =
      sum[0] * normals[3 * t] + sum[1] * normals[3 * t + 1] + sum[2] * normals[3 * t + 2];
    if (facing < 0) sides[t] = -1;
  }
  return sides;
}
