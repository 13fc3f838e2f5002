import { Box3, Sphere, Triangle, Vector3 } from 'three';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Zone } from '../../shared/jobs/plan-wishes.js';

/** The seams of a plan measured against its keep-whole zones. */
export interface ZoneClearance {
  readonly zones: number;
  /** Distance from a zone to the nearest seam, mm; Infinity when there is no seam. */
  readonly leastMm: number;
  /** Name of that zone. */
  readonly nearest: string;
  /** Names of zones that a seam runs through. */
  readonly crossed: readonly string[];
}

/**
 * Measures every triangle of every cut face against every zone, with three's own distances and
 * with nothing of the planner's. A painted zone is crossed when a cut face touches one of its
 * facets.
 * @param bodies the exact pieces: triangles with a tag above 0 are cut faces
 * @param solid what painted zones number their facets in
 */
export function measureZones(
  zones: readonly Zone[],
  bodies: readonly TriangleMesh[],
  solid: TriangleMesh,
): ZoneClearance {
  const faces = bodies.flatMap(cutFaces);
  let leastMm = Infinity;
  let nearest = '';
  const crossed: string[] = [];
  for (const zone of zones) {
    const distance = distanceTo(zone, solid);
    let least = Infinity;
    for (const face of faces) least = Math.min(least, distance(face));
    if (least <= 0) crossed.push(zone.name);
    if (least < leastMm) {
      leastMm = least;
      nearest = zone.name;
    }
  }
  return { zones: zones.length, leastMm, nearest, crossed };
}

/** Farther off than this the distance of the boxes will do for painted zones, mm. */
const FAR_MM = 20;
const LEAST_AREA_MM2 = 1e-9;

function cutFaces({ positions, indices, tags }: TriangleMesh): Triangle[] {
  const found: Triangle[] = [];
  for (let t = 0; t < indices.length / 3; t++) {
    if (!tags || tags[t] <= 0) continue;
    const [a, b, c] = [0, 1, 2].map((corner) =>
      new Vector3().fromArray(positions, 3 * indices[3 * t + corner]),
    );
    const face = new Triangle(a, b, c);
    // A triangle of no area has no nearest point; its neighbours cover it.
    if (face.getArea() > LEAST_AREA_MM2) found.push(face);
  }
  return found;
}

/** Distance from a face to a zone, mm, 0 or less when they meet; for a box that of their corners. */
function distanceTo(zone: Zone, solid: TriangleMesh): (face: Triangle) => number {
  const at = new Vector3();
  if (zone.shape === 'sphere') {
    const sphere = new Sphere(new Vector3(...zone.centre), zone.radiusMm);
    return (face) =>
      face.closestPointToPoint(sphere.center, at).distanceTo(sphere.center) - sphere.radius;
  }
  if (zone.shape === 'box') {
    const box = new Box3().setFromPoints([new Vector3(...zone.min), new Vector3(...zone.max)]);
    const corners = Array.from(
      { length: 8 },
      (_, k) =>
        new Vector3(
          k & 1 ? box.max.x : box.min.x,
          k & 2 ? box.max.y : box.min.y,
          k & 4 ? box.max.z : box.min.z,
        ),
    );
    return (face) => {
      if (box.intersectsTriangle(face)) return 0;
      let least = Infinity;
      for (const corner of corners)
        least = Math.min(least, face.closestPointToPoint(corner, at).distanceTo(corner));
      for (const point of [face.a, face.b, face.c])
        least = Math.min(least, box.distanceToPoint(point));
      return least;
    };
  }
  const points = zone.facets.flatMap((facet) =>
    [0, 1, 2].map((corner) =>
      new Vector3().fromArray(solid.positions, 3 * solid.indices[3 * facet + corner]),
    ),
  );
  const around = new Box3().setFromPoints(points);
  const own = new Box3();
  return (face) => {
    own.setFromPoints([face.a, face.b, face.c]);
    const apart = gapBetween(own, around);
    if (apart > FAR_MM) return apart;
    let least = Infinity;
    for (const point of points)
      least = Math.min(least, face.closestPointToPoint(point, at).distanceTo(point));
    return least;
  };
}

function gapBetween(a: Box3, b: Box3): number {
  const gap = (axis: 'x' | 'y' | 'z') =>
    Math.max(0, a.min[axis] - b.max[axis], b.min[axis] - a.max[axis]);
  return Math.hypot(gap('x'), gap('y'), gap('z'));
}
