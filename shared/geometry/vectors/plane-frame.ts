import { type Vector3 } from './plane.js';
import { cross, normalize } from './vector3.js';

/** Two unit vectors spanning a plane, u × v = normal. */
export interface PlaneFrame {
  readonly u: Vector3;
  readonly v: Vector3;
}

/**
 * A right-handed frame for a unit normal. Exact (entries 0 and ±1) for axis-aligned normals: u is
 * the coordinate axis most nearly perpendicular to the normal, made perpendicular.
 */
export function planeFrame(normal: Vector3): PlaneFrame {
  const [nx, ny, nz] = normal;
  const ax = Math.abs(nx);
  const ay = Math.abs(ny);
  const az = Math.abs(nz);
  const u =
    ax <= ay && ax <= az
      ? normalize([1 - nx * nx, -nx * ny, -nx * nz])
      : ay <= az
        ? normalize([-ny * nx, 1 - ny * ny, -ny * nz])
        : normalize([-nz * nx, -nz * ny, 1 - nz * nz]);
  return { u, v: cross(normal, u) };
}
