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
}

export function bodyFaces({ positions: p, indices }: TriangleMesh): BodyFaces {
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
  return { corners, halfNormals, areas, surfaceMm2 };
}
