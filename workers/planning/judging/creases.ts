import { matesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { facetNormal } from '../../../shared/geometry/mesh/facet-normal.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../../shared/geometry/vectors/plane.js';

/** A sharp edge of the surface, along which a seam does not show much. */
export interface Crease {
  readonly from: Vector3;
  readonly to: Vector3;
  readonly lengthMm: number;
}

/** Share of a seam's cost that stays where it follows a crease. Common practice, no source. */
export const CREASE_SHARE = 0.5;

/** Faces that meet at more than this make a crease, degrees. Common practice, no source. */
const CREASE_DEGREES = 30;
/** The longest are kept: these are what a plane can follow. */
const MOST_CREASES = 2_000;

/** The sharp edges of a closed mesh, the longest first. */
export function findCreases(mesh: TriangleMesh): Crease[] {
  const { positions: p, indices } = mesh;
  const { mates } = matesOf(mesh);
  const normals = new Float64Array(indices.length);
  for (let t = 0; t < indices.length; t += 3) facetNormal(p, indices, t, normals, t);
  const flat = Math.cos((CREASE_DEGREES * Math.PI) / 180);
  const found: Crease[] = [];
  for (let side = 0; side < indices.length; side++) {
    const mate = mates[side];
    if (mate < side) continue;
    const one = 3 * Math.floor(side / 3);
    const other = 3 * Math.floor(mate / 3);
    const cosine =
      normals[one] * normals[other] +
      normals[one + 1] * normals[other + 1] +
      normals[one + 2] * normals[other + 2];
    if (cosine > flat) continue;
    const a = 3 * indices[side];
    const b = 3 * indices[side % 3 === 2 ? side - 2 : side + 1];
    const from: Vector3 = [p[a], p[a + 1], p[a + 2]];
    const to: Vector3 = [p[b], p[b + 1], p[b + 2]];
    found.push({
      from,
      to,
      lengthMm: Math.hypot(to[0] - from[0], to[1] - from[1], to[2] - from[2]),
    });
  }
  return found.sort((a, b) => b.lengthMm - a.lengthMm).slice(0, MOST_CREASES);
}

/** A crease counts as in a plane when its direction leaves it by no more than this sine. */
const IN_PLANE = 0.05;

export interface CreasePlane {
  readonly offset: number;
  /** Length of the creases that lie in the plane. */
  readonly lengthMm: number;
}

/**
 * Offsets along a direction at which creases lie across it, those with the most crease first.
 * @param low, high only creases between these
 * @param most no more than this many
 */
export function creasePlanes(
  creases: readonly Crease[],
  [x, y, z]: Vector3,
  [low, high]: readonly [number, number],
  isNear: (crease: Crease) => boolean,
  most: number,
): CreasePlane[] {
  const sums = new Map<number, { offset: number; lengthMm: number }>();
  for (const crease of creases) {
    const { from, to, lengthMm } = crease;
    const a = x * from[0] + y * from[1] + z * from[2];
    const b = x * to[0] + y * to[1] + z * to[2];
    if (Math.abs(a - b) > IN_PLANE * lengthMm) continue;
    const offset = (a + b) / 2;
    if (offset <= low || offset >= high || !isNear(crease)) continue;
    // Half a millimetre apart is one line to the eye; the first of them is the place.
    const key = Math.round(2 * offset);
    const sum = sums.get(key);
    if (sum) sum.lengthMm += lengthMm;
    else sums.set(key, { offset, lengthMm });
  }
  return [...sums.values()].sort((a, b) => b.lengthMm - a.lengthMm).slice(0, most);
}
