import { type PlaneFrame } from '../vectors/plane-frame.js';
import { type Vector3 } from '../vectors/plane.js';
import { type SeamPlane } from '../sections/seam-plane.js';

/** Coordinates on a flat face seen from outside: u × v = outward. */
export interface CapFrame extends PlaneFrame {
  readonly origin: Vector3;
  readonly outward: Vector3;
}

/**
 * The coordinates of a cap in the plane of a seam. The caps on both sides share origin and u;
 * the one that looks against the plane's normal has v turned round: y there is −y here.
 */
export function capFrame(plane: SeamPlane, normal: Vector3, isAlong: boolean): CapFrame {
  const { origin, u, v } = plane;
  return isAlong
    ? { origin, u, v, outward: normal }
    : { origin, u, v: reversed(v), outward: reversed(normal) };
}

/** Outlines of the seam's coordinates in the frame of the cap that looks against its normal: mirrored, still turning the same way. */
export function mirrorLoop(loop: Float64Array): Float64Array {
  const mirrored = new Float64Array(loop.length);
  for (let i = 0, at = loop.length - 2; i < loop.length; i += 2, at -= 2) {
    mirrored[i] = loop[at];
    mirrored[i + 1] = 0 - loop[at + 1];
  }
  return mirrored;
}

/** The same outline turning the other way. */
export function reverseLoop(loop: Float64Array): Float64Array {
  const turned = new Float64Array(loop.length);
  for (let i = 0, at = loop.length - 2; i < loop.length; i += 2, at -= 2) {
    turned[i] = loop[at];
    turned[i + 1] = loop[at + 1];
  }
  return turned;
}

function reversed([x, y, z]: Vector3): Vector3 {
  return [0 - x, 0 - y, 0 - z];
}
