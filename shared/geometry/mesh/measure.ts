import { type Vector3 } from '../vectors/plane.js';
import { type TriangleMesh } from './triangle-mesh.js';

/**
 * Signed volume of a closed triangle mesh, mm³; positive when triangles wind counter-clockwise
 * seen from outside. Sum of signed tetrahedra (divergence theorem) taken from the first vertex
 * rather than the origin, so that a model far away keeps its digits. 0 for an empty mesh.
 */
export function signedVolume(mesh: TriangleMesh): number {
  const { positions, indices } = mesh;
  const ox = positions[0];
  const oy = positions[1];
  const oz = positions[2];
  let sixfold = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const a = 3 * indices[i];
    const b = 3 * indices[i + 1];
    const c = 3 * indices[i + 2];
    const bx = positions[b] - ox;
    const by = positions[b + 1] - oy;
    const bz = positions[b + 2] - oz;
    const cx = positions[c] - ox;
    const cy = positions[c + 1] - oy;
    const cz = positions[c + 2] - oz;
    sixfold +=
      (positions[a] - ox) * (by * cz - bz * cy) +
      (positions[a + 1] - oy) * (bz * cx - bx * cz) +
      (positions[a + 2] - oz) * (bx * cy - by * cx);
  }
  return sixfold / 6;
}

/** Surface area, mm²: the sum of the triangles' areas. Degenerate triangles add 0. */
export function surfaceArea(mesh: TriangleMesh): number {
  const { positions, indices } = mesh;
  let twofold = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const a = 3 * indices[i];
    const b = 3 * indices[i + 1];
    const c = 3 * indices[i + 2];
    const ux = positions[b] - positions[a];
    const uy = positions[b + 1] - positions[a + 1];
    const uz = positions[b + 2] - positions[a + 2];
    const vx = positions[c] - positions[a];
    const vy = positions[c + 1] - positions[a + 1];
    const vz = positions[c + 2] - positions[a + 2];
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const nz = ux * vy - uy * vx;
    twofold += Math.sqrt(nx * nx + ny * ny + nz * nz);
  }
  return twofold / 2;
}

export interface BoundingBox {
  readonly min: Vector3;
  readonly max: Vector3;
  readonly size: Vector3;
}

/** Axis-aligned box of flat xyz positions, in their unit. All zeros when there is no point. */
export function boundingBox(positions: ArrayLike<number>): BoundingBox {
  if (positions.length < 3) return { min: [0, 0, 0], max: [0, 0, 0], size: [0, 0, 0] };
  let x0 = Infinity;
  let y0 = Infinity;
  let z0 = Infinity;
  let x1 = -Infinity;
  let y1 = -Infinity;
  let z1 = -Infinity;
  for (let i = 0; i < positions.length; i += 3) {
    const x = positions[i];
    const y = positions[i + 1];
    const z = positions[i + 2];
    if (x < x0) x0 = x;
    if (x > x1) x1 = x;
    if (y < y0) y0 = y;
    if (y > y1) y1 = y;
    if (z < z0) z0 = z;
    if (z > z1) z1 = z;
  }
  return { min: [x0, y0, z0], max: [x1, y1, z1], size: [x1 - x0, y1 - y0, z1 - z0] };
}

/** A copy of the mesh with every coordinate multiplied; indices and tags are shared, not copied. */
export function scaleMesh(mesh: TriangleMesh, factor: number): TriangleMesh {
  const positions = new Float64Array(mesh.positions.length);
  for (let i = 0; i < positions.length; i++) positions[i] = mesh.positions[i] * factor;
  return { ...mesh, positions };
}
