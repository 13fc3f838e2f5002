import { type Vector3 } from './plane.js';
import { cross, dot, normalize } from './vector3.js';

/**
 * A rotation followed by a translation: 12 numbers, the rows of the 3×4 matrix [R|t], translation
 * in mm. A point moves to R·p + t.
 */
export type RigidMotion = readonly number[];

export const identityMotion: RigidMotion = [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0];

/**
 * Moves flat xyz positions (mm, length 3 × points) and returns `target`, a new array by default.
 * `target` may be `positions` itself.
 */
export function applyMotion(
  motion: RigidMotion,
  positions: Float64Array,
  target: Float64Array = new Float64Array(positions.length),
): Float64Array {
  const [m0, m1, m2, m3, m4, m5, m6, m7, m8, m9, m10, m11] = motion;
  for (let i = 0; i < positions.length; i += 3) {
    const x = positions[i];
    const y = positions[i + 1];
    const z = positions[i + 2];
    target[i] = m0 * x + m1 * y + m2 * z + m3;
    target[i + 1] = m4 * x + m5 * y + m6 * z + m7;
    target[i + 2] = m8 * x + m9 * y + m10 * z + m11;
  }
  return target;
}

/** The motion that does `inner` first, then `outer`. */
export function composeMotions(outer: RigidMotion, inner: RigidMotion): RigidMotion {
  const result: number[] = [];
  for (let row = 0; row < 12; row += 4) {
    for (let column = 0; column < 4; column++) {
      const moved =
        outer[row] * inner[column] +
        outer[row + 1] * inner[4 + column] +
        outer[row + 2] * inner[8 + column];
      result.push(column === 3 ? moved + outer[row + 3] : moved);
    }
  }
  return result;
}

/** The motion that undoes `motion`: the transpose of its rotation, its translation turned back. */
export function invertMotion(motion: RigidMotion): RigidMotion {
  const [m0, m1, m2, m3, m4, m5, m6, m7, m8, m9, m10, m11] = motion;
  return [
    ...[m0, m4, m8, -(m0 * m3 + m4 * m7 + m8 * m11)],
    ...[m1, m5, m9, -(m1 * m3 + m5 * m7 + m9 * m11)],
    ...[m2, m6, m10, -(m2 * m3 + m6 * m7 + m10 * m11)],
  ];
}

/** Below this cosine Rodrigues' formula divides by too small a number; the turn is made in two. */
const NEARLY_OPPOSITE = -0.9;

/**
 * The smallest rotation about the origin that takes direction `from` to direction `to` (any
 * lengths above 0, else RangeError). Entries are exactly 0 and ±1 for axis-aligned pairs; opposite
 * directions turn about an axis perpendicular to both. Source: Rodrigues' rotation formula.
 */
export function rotationTaking(from: Vector3, to: Vector3): RigidMotion {
  const a = normalize(from);
  const b = normalize(to);
  const c = dot(a, b);
  if (c >= NEARLY_OPPOSITE) return rodrigues(a, b, c);
  const half = halfTurn(perpendicularTo(a));
  const reversed: Vector3 = [-a[0], -a[1], -a[2]];
  return composeMotions(rodrigues(reversed, b, -c), half);
}

function rodrigues(a: Vector3, b: Vector3, cosine: number): RigidMotion {
  const [x, y, z] = cross(a, b);
  const k = 1 / (1 + cosine);
  const rows = [
    ...[1 - k * (y * y + z * z), k * x * y - z, k * x * z + y, 0],
    ...[k * x * y + z, 1 - k * (x * x + z * z), k * y * z - x, 0],
    ...[k * x * z - y, k * y * z + x, 1 - k * (x * x + y * y), 0],
  ];
  return rows.map((entry) => entry + 0);
}

function halfTurn([x, y, z]: Vector3): RigidMotion {
  const rows = [
    ...[2 * x * x - 1, 2 * x * y, 2 * x * z, 0],
    ...[2 * x * y, 2 * y * y - 1, 2 * y * z, 0],
    ...[2 * x * z, 2 * y * z, 2 * z * z - 1, 0],
  ];
  return rows.map((entry) => entry + 0);
}

function perpendicularTo([x, y, z]: Vector3): Vector3 {
  const ax = Math.abs(x);
  const ay = Math.abs(y);
  const az = Math.abs(z);
  if (ax <= ay && ax <= az) return normalize([0, -z, y]);
  return ay <= az ? normalize([z, 0, -x]) : normalize([-y, x, 0]);
}
