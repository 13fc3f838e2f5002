import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { principalAxes } from '../../../shared/geometry/fitting/principal-axes.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../../shared/geometry/vectors/plane.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { sampleSurface } from '../../measuring/surface-samples.js';
import { sideOf } from './seam-strength.js';
import { Vector3 as Point } from 'three';

const SAMPLES = 400;
/** Mirrored points lie this near to the surface, share of the box's diagonal … */
const REACH = 0.006;
/** … all but this share of them. */
const STRAYS = 0.03;

/**
 * Planes in which a closed mesh is its own mirror image, the most exact first: through the middle
 * of its volume, across the coordinate axes or the principal axes. Judged on samples of the
 * surface, so that meshes whose triangles differ from side to side are found as well.
 */
export function findMirrors(mesh: TriangleMesh): Plane[] {
  const { middle } = sideOf([mesh]);
  const reach = REACH * Math.hypot(...boundingBox(mesh.positions).size);
  const { count, points } = sampleSurface(mesh, SAMPLES);
  if (count === 0) return [];
  const bvh = buildBvh(mesh);
  const axes: Vector3[] = [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ];
  for (const axis of principalAxes(mesh.positions))
    if (axes.every((known) => Math.abs(dot(known, axis)) < 0.9999)) axes.push(axis);
  const point = new Point();
  const target = { point: new Point(), distance: 0, faceIndex: 0 };
  const found: { plane: Plane; mean: number }[] = [];
  for (const normal of axes) {
    const offset = dot(normal, middle);
    let strays = 0;
    let sum = 0;
    for (let k = 0; k < 3 * count && strays <= STRAYS * count; k += 3) {
      const p: Vector3 = [points[k], points[k + 1], points[k + 2]];
      const twice = 2 * (dot(normal, p) - offset);
      point.set(p[0] - twice * normal[0], p[1] - twice * normal[1], p[2] - twice * normal[2]);
      const distance = bvh.closestPointToPoint(point, target)?.distance ?? Infinity;
      if (distance > reach) strays++;
      sum += distance;
    }
    if (strays <= STRAYS * count) found.push({ plane: { normal, offset }, mean: sum / count });
  }
  return found.sort((a, b) => a.mean - b.mean).map(({ plane }) => plane);
}

/** A plane as its image in a mirror: what was above stays above. */
export function mirrored({ normal, offset }: Plane, mirror: Plane): Plane {
  const along = 2 * dot(normal, mirror.normal);
  const turned: Vector3 = [
    normal[0] - along * mirror.normal[0],
    normal[1] - along * mirror.normal[1],
    normal[2] - along * mirror.normal[2],
  ];
  return { normal: turned, offset: offset - along * mirror.offset };
}

function dot(a: Vector3, b: Vector3): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}
