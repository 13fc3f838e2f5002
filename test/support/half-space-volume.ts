import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';

/**
 * Volume of a closed mesh above a plane, mm³, without cutting it: the sum over its triangles of the
 * signed column between the triangle and the plane, ∫ max(d, 0) over the triangle's shadow on the
 * plane (divergence theorem for the field d·n; the plane itself adds nothing). On a triangle with
 * area A, ∫ max(d, 0) is A times the mean of d where it is positive everywhere, A·p³ / (3 (p − q)
 * (p − r)) where one corner p alone is positive, and ∫ d − ∫ min(d, 0) where two are.
 * Its own derivation, no source; it shares nothing with the kernel.
 */
export function volumeAbove(mesh: TriangleMesh, { normal, offset }: Plane): number {
  const { positions, indices } = mesh;
  let volume = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const [a, b, c] = [0, 1, 2].map((corner) => 3 * indices[i + corner]!) as [
      number,
      number,
      number,
    ];
    const distance = (at: number) =>
      normal[0] * positions[at]! +
      normal[1] * positions[at + 1]! +
      normal[2] * positions[at + 2]! -
      offset;
    const edge = (at: number) => [0, 1, 2].map((k) => positions[at + k]! - positions[a + k]!);
    const [ux, uy, uz] = edge(b) as [number, number, number];
    const [vx, vy, vz] = edge(c) as [number, number, number];
    const shadow =
      (normal[0] * (uy * vz - uz * vy) +
        normal[1] * (uz * vx - ux * vz) +
        normal[2] * (ux * vy - uy * vx)) /
      2;
    volume += shadow * meanPositivePart(distance(a), distance(b), distance(c));
  }
  return volume;
}

function meanPositivePart(d0: number, d1: number, d2: number): number {
  const [low, middle, high] = [d0, d1, d2].sort((a, b) => a - b) as [number, number, number];
  const mean = (low + middle + high) / 3;
  if (low >= 0) return mean;
  if (high <= 0) return 0;
  if (middle <= 0) return high ** 3 / (3 * (high - middle) * (high - low));
  return mean - low ** 3 / (3 * (low - middle) * (low - high));
}
