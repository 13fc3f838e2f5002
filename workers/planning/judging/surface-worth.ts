import { DoubleSide, Ray, Vector3 as Point } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { facetNormal } from '../../../shared/geometry/mesh/facet-normal.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../../shared/geometry/vectors/plane.js';
import { planeFrame } from '../../../shared/geometry/vectors/plane-frame.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { type Crease, findCreases } from './creases.js';
import { type PlanZone } from './plan-zone.js';

/** What a seam costs where it comes to the surface. */
export interface SurfaceWorth {
  /** Of the triangles of the searched mesh, 0 hidden … 1 in full view; more inside show zones. */
  readonly ofTriangle: Float32Array;
  /** At any point of the surface: that of the nearest triangle. */
  readonly at: (x: number, y: number, z: number) => number;
  readonly creases: readonly Crease[];
}

/** Every side counts alike and nothing is hidden. */
export const plainWorth: SurfaceWorth = {
  ofTriangle: new Float32Array(0),
  at: () => 1,
  creases: [],
};

/** Where nothing is known of a trial part's triangle. */
const USUAL_WORTH = 0.5;

/**
 * Triangles of trial parts say where they come from in their tags: −1 − t is triangle t of the
 * searched mesh, above 0 is a cap, which nobody sees.
 */
export function worthOfTag({ ofTriangle }: SurfaceWorth, tag: number): number {
  if (tag > 0) return 0;
  return tag < 0 && -1 - tag < ofTriangle.length ? ofTriangle[-1 - tag] : USUAL_WORTH;
}

/** The mesh with tags that name its triangles; see `worthOfTag`. */
export function nameTriangles(mesh: TriangleMesh): TriangleMesh {
  return {
    positions: mesh.positions,
    indices: mesh.indices,
    tags: Int32Array.from({ length: mesh.indices.length / 3 }, (_, triangle) => -1 - triangle),
  };
}

/** Rays a triangle, over the half-space that it faces. Common practice, no source. */
const RAYS = 16;
/** Share of the worth that stays on a side nobody looks at. */
const UNSEEN_SHARE = 0.15;
/** A show zone makes a seam this many times dearer. */
const ZONE_FACTOR = 3;
/** Rays start off the surface by this share of its size. */
const LIFT = 1e-5;

/**
 * How exposed each triangle is: the share of rays from its middle that leave the object, spread by
 * the cosine; when there are show directions, mostly how squarely the triangle faces the best one
 * that it can be seen from.
 * @param showDirections from the object to the viewer, any length but 0
 */
export function measureWorth(
  mesh: TriangleMesh,
  showDirections: readonly Vector3[],
  showZones: readonly PlanZone[],
): SurfaceWorth {
  const { positions: p, indices } = mesh;
  const triangles = indices.length / 3;
  const bvh = buildBvh(mesh);
  const lift = LIFT * Math.hypot(...boundingBox(p).size);
  const shows = showDirections.map(([x, y, z]) => {
    const length = Math.hypot(x, y, z) || 1;
    return [x / length, y / length, z / length] as const;
  });
  const ofTriangle = new Float32Array(triangles);
  const normal = new Float64Array(3);
  const ray = new Ray();
  for (let t = 0; t < triangles; t++) {
    facetNormal(p, indices, 3 * t, normal, 0);
    const middle = [0, 1, 2].map(
      (axis) =>
        (p[3 * indices[3 * t] + axis] +
          p[3 * indices[3 * t + 1] + axis] +
          p[3 * indices[3 * t + 2] + axis]) /
        3,
    );
    ray.origin.set(
      middle[0] + lift * normal[0],
      middle[1] + lift * normal[1],
      middle[2] + lift * normal[2],
    );
    const open = openShare(ray, bvh, [normal[0], normal[1], normal[2]]);
    let worth = open;
    if (shows.length > 0) {
      let seen = 0;
      for (const [x, y, z] of shows) {
        const facing = normal[0] * x + normal[1] * y + normal[2] * z;
        if (facing > seen && isOpen(ray, bvh, x, y, z)) seen = facing;
      }
      worth = UNSEEN_SHARE * open + (1 - UNSEEN_SHARE) * seen;
    }
    const isShown = showZones.some((zone) => zone.holds(middle[0], middle[1], middle[2]));
    ofTriangle[t] = isShown ? ZONE_FACTOR * worth : worth;
  }
  const point = new Point();
  const target = { point: new Point(), distance: 0, faceIndex: 0 };
  return {
    ofTriangle,
    creases: findCreases(mesh),
    at: (x, y, z) => {
      const found = bvh.closestPointToPoint(point.set(x, y, z), target);
      return found ? ofTriangle[found.faceIndex] : USUAL_WORTH;
    },
  };
}

/** Directions over a half-space about z, denser about it by the cosine: a golden-angle spiral. */
const spiral = Array.from({ length: RAYS }, (_, k): Vector3 => {
  const share = (k + 0.5) / RAYS;
  const angle = k * Math.PI * (3 - Math.sqrt(5));
  const flat = Math.sqrt(share);
  return [flat * Math.cos(angle), flat * Math.sin(angle), Math.sqrt(1 - share)];
});

function openShare(ray: Ray, bvh: MeshBVH, normal: Vector3): number {
  const length = Math.hypot(...normal);
  if (length === 0) return 0;
  const { u, v } = planeFrame(normal);
  let open = 0;
  for (const [a, b, c] of spiral) {
    const x = a * u[0] + b * v[0] + c * normal[0];
    const y = a * u[1] + b * v[1] + c * normal[1];
    const z = a * u[2] + b * v[2] + c * normal[2];
    if (isOpen(ray, bvh, x, y, z)) open++;
  }
  return open / RAYS;
}

function isOpen(ray: Ray, bvh: MeshBVH, x: number, y: number, z: number): boolean {
  ray.direction.set(x, y, z);
  return bvh.raycastFirst(ray, DoubleSide) === null;
}
