import { type Vector3 } from '../vectors/plane.js';
import { type RigidMotion } from '../vectors/rigid-motion.js';
import { type BuildSpace } from './build-space.js';
import { supportPoints } from './convex-hull-3d.js';
import { fitFootprint } from './footprint.js';
import { bedDiagonal, spaceDiagonal } from './space-measures.js';

/**
 * A piece may be over by this much and still counts as fitting, mm. Files hold single precision,
 * whose step reaches 3e-5 mm below 512 mm: a model of exactly the space's size must not be cut.
 */
export const FIT_TOLERANCE_MM = 5e-5;

/** For fewer resting directions, reducing the points to their hull first costs more than it saves. */
const HULL_PAYS_FROM = 4;

export interface BedPose {
  /**
   * From the assembled model to the bed: the piece rests on z = 0, centred on the bed; x in
   * [0, width], y in [0, depth], or inside the disk centred at (d/2, d/2).
   */
  readonly motion: RigidMotion;
  /** Smallest room left over height, width and depth (diameter), mm; negative when over. */
  readonly slackMm: number;
  /** Whether the slack is at least −FIT_TOLERANCE_MM. */
  readonly fits: boolean;
  /** The resting direction that was used: it points at the bed in the assembled frame. */
  readonly down: Vector3;
}

/**
 * Lays a piece in the build space: the first of the given resting directions in which it fits in
 * any rotation on the bed; when none does, tilts that lay its longest extent along the space's
 * diagonal are tried too; when nothing fits, the pose that is over by least.
 * @param points flat xyz, mm; anything whose hull is the piece's hull. No points, or all in one
 *   place, fit with all the room
 * @param downs unit resting directions in order of preference, as `candidateDowns` gives them;
 *   an empty list stands for −z
 */
export function layOnBed(
  points: Float64Array,
  space: BuildSpace,
  downs: readonly Vector3[],
): BedPose {
  const support = downs.length >= HULL_PAYS_FROM ? supportPoints(points) : points;
  const tried: readonly Vector3[] = downs.length > 0 ? downs : [[0, 0, -1]];
  let best: BedPose | null = null;
  for (const down of tried) {
    const pose = poseOn(support, space, down, best?.slackMm ?? -Infinity);
    if (pose?.fits) return pose;
    if (pose) best = pose;
  }
  for (const down of diagonalDowns(support, space)) {
    const pose = poseOn(support, space, down, best?.slackMm ?? -Infinity);
    if (pose?.fits) return pose;
    if (pose) best = pose;
  }
  return best as BedPose;
}

/**
 * The pose on one resting direction, or null when it leaves no more than `atLeast` of room.
 * @param support flat xyz, mm, whose hull is the piece's hull
 */
export function poseOn(
  support: Float64Array,
  space: BuildSpace,
  down: Vector3,
  atLeast = -Infinity,
): BedPose | null {
  const [ux, uy, uz, vx, vy, vz] = bedAxes(down);
  const count = support.length / 3;
  let low = Infinity;
  let high = -Infinity;
  const footprint = new Float64Array(2 * count);
  for (let k = 0; k < count; k++) {
    const x = support[3 * k];
    const y = support[3 * k + 1];
    const z = support[3 * k + 2];
    const height = -(down[0] * x + down[1] * y + down[2] * z);
    if (height < low) low = height;
    if (height > high) high = height;
    footprint[2 * k] = ux * x + uy * y + uz * z;
    footprint[2 * k + 1] = vx * x + vy * y + vz * z;
  }
  if (count === 0) low = high = 0;
  const overhead = space.heightMm - (high - low);
  if (overhead <= atLeast) return null;
  const { slackMm: onBed, cos, sin, shiftX, shiftY } = fitFootprint(footprint, space);
  const slackMm = Math.min(overhead, onBed);
  if (slackMm <= atLeast) return null;
  const motion: RigidMotion = [
    cos * ux - sin * vx,
    cos * uy - sin * vy,
    cos * uz - sin * vz,
    shiftX,
    sin * ux + cos * vx,
    sin * uy + cos * vy,
    sin * uz + cos * vz,
    shiftY,
    0 - down[0],
    0 - down[1],
    0 - down[2],
    0 - low,
  ];
  return { motion, slackMm, fits: slackMm >= -FIT_TOLERANCE_MM, down };
}

/** Right-handed axes u, v of a bed whose up is −down; coordinate axes stay exact. */
function bedAxes(down: Vector3): [number, number, number, number, number, number] {
  const [x, y, z] = [0 - down[0], 0 - down[1], 0 - down[2]];
  const e: [number, number, number] = [0, 0, 0];
  const least = Math.min(Math.abs(x), Math.abs(y), Math.abs(z));
  e[Math.abs(x) === least ? 0 : Math.abs(y) === least ? 1 : 2] = 1;
  const along = e[0] * x + e[1] * y + e[2] * z;
  let [ux, uy, uz] = [e[0] - along * x, e[1] - along * y, e[2] - along * z];
  const length = Math.sqrt(ux * ux + uy * uy + uz * uz);
  ux /= length;
  uy /= length;
  uz /= length;
  return [ux, uy, uz, y * uz - z * uy, z * ux - x * uz, x * uy - y * ux];
}

/** How far beside the diagonal's own slope tilts are tried, rad: a thick rod needs another slope. */
const SLOPE_STEPS = [0, -0.06, 0.06, -0.14, 0.14];
const TURNS = 8;

/**
 * Resting directions that lay a long piece on the space's diagonal. Empty when it is so short that
 * it needs none or so long that none helps.
 */
export function diagonalDowns(support: Float64Array, space: BuildSpace): Vector3[] {
  const pair = farPair(support);
  if (!pair) return [];
  const { axis, length } = pair;
  if (length > spaceDiagonal(space) + FIT_TOLERANCE_MM) return [];
  if (length <= Math.min(bedDiagonal(space), space.heightMm)) return [];
  const [ux, uy, uz, vx, vy, vz] = bedAxes(axis);
  const slope = Math.atan2(bedDiagonal(space), space.heightMm);
  const downs: Vector3[] = [];
  for (const step of SLOPE_STEPS) {
    const c = Math.cos(slope + step);
    const s = Math.sin(slope + step);
    for (let turn = 0; turn < TURNS; turn++) {
      const angle = (2 * Math.PI * turn) / TURNS;
      const a = s * Math.cos(angle);
      const b = s * Math.sin(angle);
      downs.push([
        -(c * axis[0] + a * ux + b * vx),
        -(c * axis[1] + a * uy + b * vy),
        -(c * axis[2] + a * uz + b * vz),
      ]);
    }
  }
  return downs;
}

/** Two points (nearly) farthest apart: farthest from the middle, then twice farthest from that. */
function farPair(points: Float64Array): { axis: Vector3; length: number } | null {
  if (points.length < 6) return null;
  let from = 0;
  let to = 0;
  for (let round = 0; round < 3; round++) {
    let most = -1;
    let best = from;
    for (let k = 0; k < points.length; k += 3) {
      const x = points[k] - points[from];
      const y = points[k + 1] - points[from + 1];
      const z = points[k + 2] - points[from + 2];
      const far = x * x + y * y + z * z;
      if (far > most) {
        most = far;
        best = k;
      }
    }
    to = from;
    from = best;
  }
  const x = points[from] - points[to];
  const y = points[from + 1] - points[to + 1];
  const z = points[from + 2] - points[to + 2];
  const length = Math.sqrt(x * x + y * y + z * z);
  return length > 0 ? { axis: [x / length, y / length, z / length], length } : null;
}
