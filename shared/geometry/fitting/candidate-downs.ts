import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Vector3 } from '../vectors/plane.js';
import { type ConvexHull, convexHull3d, cornerPoints } from './convex-hull-3d.js';
import { outerVertices } from './outer-vertices.js';
import { principalAxes } from './principal-axes.js';

/** Faces whose normal is steeper than this below the horizon need support: sin 45°. */
const OVERHANG_SIN = Math.SQRT1_2;
/** Directions closer than this count as one (cosine). */
const SAME_DIRECTION = 1 - 1e-6;
/** A hull face counts as something to stand on from this share of the hull's area. */
const STANDING_SHARE = 0.004;
const HULL_FACES = 14;
const CAP_FACES = 12;
/** Triangles looked at when overhangs are compared; more are sampled evenly. */
const OVERHANG_TRIANGLES = 6_000;

const DIAGONAL = Math.SQRT1_2;
const SPACE = 1 / Math.sqrt(3);

/** The 26 directions from a cube's middle to its faces, edges and corners, faces first. */
export const cubeDirections: readonly Vector3[] = (() => {
  const found: [number, Vector3][] = [];
  for (let x = -1; x <= 1; x++)
    for (let y = -1; y <= 1; y++)
      for (let z = -1; z <= 1; z++) {
        const parts = Math.abs(x) + Math.abs(y) + Math.abs(z);
        if (parts === 0) continue;
        const length = parts === 1 ? 1 : parts === 2 ? DIAGONAL : SPACE;
        found.push([parts, [x * length + 0, y * length + 0, z * length + 0]]);
      }
  return found.sort((a, b) => a[0] - b[0]).map(([, direction]) => direction);
})();

/**
 * Resting directions worth trying for a piece, the most promising first: first those it can stand
 * on (cut faces by their tags, large faces of its hull) and the coordinate axes, then the other
 * cube directions and the principal axes, each group by the area that would overhang by more than
 * 45°. The overhang area is a planning figure; support volume comes later.
 * @param limit at most this many
 * @returns unit vectors that point at the bed, in the mesh's own frame; −z alone for an empty mesh
 */
export function candidateDowns(mesh: TriangleMesh, limit = 80): Vector3[] {
  const { standing, others } = restingDirections(mesh);
  return [...byOverhang(mesh, standing), ...byOverhang(mesh, others)].slice(0, Math.max(1, limit));
}

/**
 * The same directions without an order of preference: enough to ask whether a piece fits at all.
 * `standing`: cut faces, large hull faces, coordinate axes; `others`: the rest.
 * @param points stand for the mesh's hull; by default a selection of its vertices, so that a dense
 *   mesh costs no more than a light one
 * @param hull of these points, when it is known already
 */
export function restingDirections(
  mesh: TriangleMesh,
  points: Float64Array = outerVertices(mesh.positions),
  hull: ConvexHull | null = convexHull3d(points),
): { standing: Vector3[]; others: Vector3[] } {
  const found = new DirectionSet();
  for (const down of capDowns(mesh)) found.add(down);
  for (const down of hullDowns(points, hull)) found.add(down);
  for (const down of cubeDirections.slice(0, 6)) found.add(down);
  const start = found.directions.length;
  for (const down of cubeDirections) found.add(down);
  for (const axis of principalAxes(cornerPoints(points, hull))) {
    found.add(axis);
    found.add([0 - axis[0], 0 - axis[1], 0 - axis[2]]);
  }
  return { standing: found.directions.slice(0, start), others: found.directions.slice(start) };
}

/** Directions without near-duplicates, in the order of their adding. */
class DirectionSet {
  readonly directions: Vector3[] = [];
  add(direction: Vector3): void {
    const [x, y, z] = direction;
    for (const d of this.directions) if (d[0] * x + d[1] * y + d[2] * z > SAME_DIRECTION) return;
    this.directions.push(direction);
  }
}

/** Outward normals of the cut faces, the largest first. */
function capDowns(mesh: TriangleMesh): Vector3[] {
  const { positions: p, indices, tags } = mesh;
  if (!tags) return [];
  const sums = new Map<number, [number, number, number]>();
  for (let t = 0; t < tags.length; t++) {
    if (tags[t] <= 0) continue;
    const n = doubleAreaNormal(p, indices, t);
    const sum = sums.get(tags[t]);
    if (!sum) sums.set(tags[t], n);
    else {
      sum[0] += n[0];
      sum[1] += n[1];
      sum[2] += n[2];
    }
  }
  return largest([...sums.values()], CAP_FACES);
}

/** Outward normals of the hull's faces, coplanar facets taken together, the largest first. */
function hullDowns(positions: Float64Array, hull: ConvexHull | null): Vector3[] {
  if (!hull) return [];
  const faces = new Map<string, [number, number, number]>();
  let total = 0;
  for (let t = 0; t < hull.facets.length / 3; t++) {
    const n = doubleAreaNormal(positions, hull.facets, t);
    const length = Math.hypot(n[0], n[1], n[2]);
    if (length === 0) continue;
    total += length;
    // Facets within about a third of a degree of one another are one face to stand on.
    const key = n.map((c) => Math.round((c / length) * 200)).join(' ');
    const sum = faces.get(key);
    if (!sum) faces.set(key, n);
    else {
      sum[0] += n[0];
      sum[1] += n[1];
      sum[2] += n[2];
    }
  }
  const stable = [...faces.values()].filter((n) => Math.hypot(...n) >= STANDING_SHARE * total);
  return largest(stable, HULL_FACES);
}

function largest(normals: [number, number, number][], count: number): Vector3[] {
  return normals
    .map((n): [number, Vector3] => {
      const length = Math.hypot(n[0], n[1], n[2]);
      return [length, snapToAxis([n[0] / length, n[1] / length, n[2] / length])];
    })
    .filter(([length]) => length > 0)
    .sort((a, b) => b[0] - a[0])
    .slice(0, count)
    .map(([, direction]) => direction);
}

/** A direction within rounding of a coordinate axis becomes that axis, so that boxes stay exact. */
function snapToAxis(n: Vector3): Vector3 {
  const axis = n.findIndex((c) => Math.abs(c) > 1 - 1e-12);
  if (axis < 0) return n;
  const sign = n[axis] < 0 ? -1 : 1;
  return [axis === 0 ? sign : 0, axis === 1 ? sign : 0, axis === 2 ? sign : 0];
}

function doubleAreaNormal(
  p: Float64Array,
  indices: Uint32Array,
  t: number,
): [number, number, number] {
  const a = 3 * indices[3 * t];
  const b = 3 * indices[3 * t + 1];
  const c = 3 * indices[3 * t + 2];
  const ux = p[b] - p[a];
  const uy = p[b + 1] - p[a + 1];
  const uz = p[b + 2] - p[a + 2];
  const vx = p[c] - p[a];
  const vy = p[c + 1] - p[a + 1];
  const vz = p[c + 2] - p[a + 2];
  return [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
}

/** Sorts directions by the area that would hang over the bed; equal ones keep their order. */
function byOverhang(mesh: TriangleMesh, downs: readonly Vector3[]): Vector3[] {
  const overhang = overhangAreas(mesh, downs);
  return downs
    .map((_, k) => k)
    .sort((a, b) => overhang[a] - overhang[b] || a - b)
    .map((k) => downs[k]);
}

/**
 * Area, mm², of the facets that face more than 45° downwards and do not lie on the bed, for each
 * resting direction; from an even sample of the triangles of a large mesh.
 */
export function overhangAreas(mesh: TriangleMesh, downs: readonly Vector3[]): Float64Array {
  const { positions: p, indices } = mesh;
  const triangles = indices.length / 3;
  const stride = Math.max(1, Math.ceil(triangles / OVERHANG_TRIANGLES));
  const lowest = new Float64Array(downs.length).fill(-Infinity);
  for (let k = 0; k < p.length; k += 3) {
    for (let d = 0; d < downs.length; d++) {
      const depth = downs[d][0] * p[k] + downs[d][1] * p[k + 1] + downs[d][2] * p[k + 2];
      if (depth > lowest[d]) lowest[d] = depth;
    }
  }
  const areas = new Float64Array(downs.length);
  for (let t = 0; t < triangles; t += stride) {
    const n = doubleAreaNormal(p, indices, t);
    const length = Math.hypot(n[0], n[1], n[2]);
    if (length === 0) continue;
    const a = 3 * indices[3 * t];
    for (let d = 0; d < downs.length; d++) {
      const [x, y, z] = downs[d];
      const facing = n[0] * x + n[1] * y + n[2] * z;
      if (facing <= OVERHANG_SIN * length) continue;
      const depth = x * p[a] + y * p[a + 1] + z * p[a + 2];
      const onBed = facing > 0.9999 * length && depth > lowest[d] - 0.01;
      if (!onBed) areas[d] += (stride * length) / 2;
    }
  }
  return areas;
}
