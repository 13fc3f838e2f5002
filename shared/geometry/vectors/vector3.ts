import { type Vector3 } from './plane.js';

/** Small pure helpers for single vectors; hot loops unroll their own arithmetic. Units pass through. */
export function add(a: Vector3, b: Vector3): Vector3 {
  return [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
}

export function subtract(a: Vector3, b: Vector3): Vector3 {
  return [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
}

export function scale(a: Vector3, factor: number): Vector3 {
  return [a[0] * factor, a[1] * factor, a[2] * factor];
}

export function dot(a: Vector3, b: Vector3): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

export function cross(a: Vector3, b: Vector3): Vector3 {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}

export function length(a: Vector3): number {
  return Math.hypot(a[0], a[1], a[2]);
}

/** The unit vector along a. A zero or non-finite vector has no direction and throws a RangeError. */
export function normalize(a: Vector3): Vector3 {
  const size = length(a);
  if (!(size > 0) || !Number.isFinite(size)) {
    throw new RangeError(`A vector of length ${size} has no direction.`);
  }
  return [a[0] / size, a[1] / size, a[2] / size];
}
