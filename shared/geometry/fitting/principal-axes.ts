import { type Vector3 } from '../vectors/plane.js';

/** Sweeps after which a 3×3 Jacobi iteration has long converged. */
const JACOBI_SWEEPS = 24;

/**
 * Principal axes of a point set: unit eigenvectors of its covariance, the longest spread first.
 * Signs are fixed so that each axis' largest component is positive.
 * @param points flat xyz, mm; fewer than two points give the coordinate axes
 * Source: cyclic Jacobi rotation, any numerical analysis textbook. Cost O(count).
 */
export function principalAxes(points: Float64Array): [Vector3, Vector3, Vector3] {
  const count = points.length / 3;
  if (count < 2)
    return [
      [1, 0, 0],
      [0, 1, 0],
      [0, 0, 1],
    ];
  const mean = [0, 0, 0];
  for (let k = 0; k < points.length; k++) mean[k % 3] += points[k] / count;
  const m = new Float64Array(9);
  for (let k = 0; k < points.length; k += 3) {
    const x = points[k] - mean[0];
    const y = points[k + 1] - mean[1];
    const z = points[k + 2] - mean[2];
    m[0] += x * x;
    m[1] += x * y;
    m[2] += x * z;
    m[4] += y * y;
    m[5] += y * z;
    m[8] += z * z;
  }
  m[3] = m[1];
  m[6] = m[2];
  m[7] = m[5];
  const vectors = diagonalise(m);
  const order = [0, 1, 2].sort((a, b) => m[4 * b] - m[4 * a] || a - b);
  const axis = (column: number): Vector3 => {
    const v = [vectors[column], vectors[3 + column], vectors[6 + column]];
    const largest = v.reduce((a, b) => (Math.abs(b) > Math.abs(a) ? b : a));
    const sign = largest < 0 ? -1 : 1;
    return [v[0] * sign + 0, v[1] * sign + 0, v[2] * sign + 0];
  };
  return [axis(order[0]), axis(order[1]), axis(order[2])];
}

/** Diagonalises a symmetric 3×3 matrix in place; returns the eigenvectors as columns. */
function diagonalise(m: Float64Array): Float64Array {
  const vectors = Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1);
  for (let sweep = 0; sweep < JACOBI_SWEEPS; sweep++) {
    for (let p = 0; p < 2; p++) {
      for (let q = p + 1; q < 3; q++) {
        const off = m[3 * p + q];
        if (Math.abs(off) <= Number.EPSILON * Math.hypot(m[4 * p], m[4 * q])) continue;
        const theta = (m[4 * q] - m[4 * p]) / (2 * off);
        const t = (theta < 0 ? -1 : 1) / (Math.abs(theta) + Math.sqrt(theta * theta + 1));
        const c = 1 / Math.sqrt(t * t + 1);
        const s = t * c;
        for (let k = 0; k < 3; k++) rotate(m, 3 * k + p, 3 * k + q, c, s);
        for (let k = 0; k < 3; k++) rotate(m, 3 * p + k, 3 * q + k, c, s);
        for (let k = 0; k < 3; k++) rotate(vectors, 3 * k + p, 3 * k + q, c, s);
      }
    }
  }
  return vectors;
}

function rotate(m: Float64Array, i: number, j: number, c: number, s: number): void {
  const a = m[i];
  const b = m[j];
  m[i] = c * a - s * b;
  m[j] = s * a + c * b;
}
