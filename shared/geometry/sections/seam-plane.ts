import { planeFrame, type PlaneFrame } from '../vectors/plane-frame.js';
import { type Plane, type Vector3 } from '../vectors/plane.js';

/** Plane coordinates whose origin is near the region of interest, which keeps their digits. */
export interface SeamPlane extends PlaneFrame {
  readonly origin: Vector3;
}

/** Coordinates in a plane, their origin at the point of it nearest to the given one (mm). */
export function seamPlane(plane: Plane, near: Vector3): SeamPlane {
  const [nx, ny, nz] = plane.normal;
  const distance = nx * near[0] + ny * near[1] + nz * near[2] - plane.offset;
  return {
    ...planeFrame(plane.normal),
    origin: [near[0] - distance * nx, near[1] - distance * ny, near[2] - distance * nz],
  };
}

/** Plane coordinates of the point whose flat xyz begins at `at`, mm. */
export function toPlane(
  { origin, u, v }: SeamPlane,
  positions: ArrayLike<number>,
  at: number,
): [number, number] {
  const x = positions[at] - origin[0];
  const y = positions[at + 1] - origin[1];
  const z = positions[at + 2] - origin[2];
  return [x * u[0] + y * u[1] + z * u[2], x * v[0] + y * v[1] + z * v[2]];
}

/** The point in space of plane coordinates, mm. */
export function fromPlane({ origin, u, v }: SeamPlane, a: number, b: number): Vector3 {
  return [
    origin[0] + a * u[0] + b * v[0],
    origin[1] + a * u[1] + b * v[1],
    origin[2] + a * u[2] + b * v[2],
  ];
}
