import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { sampleSurface } from '../../measuring/surface-samples.js';
import { buildWindingTree } from '../remeshing/winding-tree.js';

const boxPoints = 500;
const surfacePoints = 500;
/** Winding numbers this far from a whole number are those of points close to a surface. */
const nearWhole = 0.1;
/** How far off the surface points are asked, as shares of the box's diagonal. */
const offs = [1e-4, -1e-4, 5e-3, -5e-3];

/**
 * Whether a united solid holds the same points as the shells that it was made of: those around which
 * these wind more than zero times. Asked of points spread over the box and close to both surfaces.
 */
export function isSameInside(before: TriangleMesh, after: TriangleMesh): boolean {
  const { min, size } = boundingBox(before.positions);
  const middle = min.map((value, axis) => value + size[axis] / 2);
  const one = buildWindingTree(before, middle);
  const other = buildWindingTree(after, middle);
  const points = [
    ...pointsInBox(min, size),
    ...pointsNear(before, Math.hypot(...size)),
    ...pointsNear(after, Math.hypot(...size)),
  ];
  return points.every(([x, y, z]) => {
    const was = one.windingAt(x, y, z);
    const is = other.windingAt(x, y, z);
    const isNear =
      Math.abs(was - Math.round(was)) > nearWhole || Math.abs(is - Math.round(is)) > nearWhole;
    return isNear || was > 0.5 === is > 0.5;
  });
}

/** The fractional parts of multiples of these fill a cube evenly: M. Roberts, "The unreasonable
 *  effectiveness of quasirandom sequences", 2018. */
const shares = [0.8191725133961645, 0.6710436067037893, 0.5497004779019703];

function pointsInBox(min: readonly number[], size: readonly number[]): number[][] {
  return Array.from({ length: boxPoints }, (_, i) =>
    shares.map((share, axis) => min[axis] + size[axis] * ((0.5 + share * (i + 1)) % 1)),
  );
}

function pointsNear(mesh: TriangleMesh, diagonal: number): number[][] {
  const { positions: p, indices } = mesh;
  const { count, points, triangles } = sampleSurface(mesh, surfacePoints);
  return Array.from({ length: count }, (_, i) => {
    const [a, b, c] = [0, 1, 2].map((corner) => 3 * indices[3 * triangles[i] + corner]);
    const [ux, uy, uz] = [p[b] - p[a], p[b + 1] - p[a + 1], p[b + 2] - p[a + 2]];
    const [vx, vy, vz] = [p[c] - p[a], p[c + 1] - p[a + 1], p[c + 2] - p[a + 2]];
    const normal = [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
    const step = (offs[i % offs.length] * diagonal) / (Math.hypot(...normal) || 1);
    return normal.map((value, axis) => points[3 * i + axis] + step * value);
  });
}
