import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type BedPose } from '../../shared/geometry/fitting/lay-on-bed.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { roundAndWeld, type RoundedMesh } from '../../shared/geometry/mesh/rounded.js';
import { connectedShells } from '../../shared/geometry/mesh/solids.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import {
  applyMotion,
  composeMotions,
  identityMotion,
  type RigidMotion,
} from '../../shared/geometry/vectors/rigid-motion.js';

/** Coordinates this close to 0 are what the motion's arithmetic left of 0, mm. */
const ZERO_MM = 1e-7;

/** Places tried on the bed, the first as laid, half of them turned by half a turn. */
export const PLACES_TRIED = 24;

/** The farthest a piece is moved to find coordinates that round well, mm. */
const FARTHEST_SHIFT_MM = 0.05;

/**
 * Share of its own volume that rounding may cost a piece before another place is tried: half of what
 * the proof allows the whole model.
 */
const VOLUME_SHARE = 5e-7;

export interface RoundedPiece {
  /** From the assembled model to the bed, as really used. */
  motion: RigidMotion;
  rounded: RoundedMesh;
  /** Whether it is closed and of one body after rounding; when not, `fault` says what is wrong. */
  sound: boolean;
  fault: string;
}

/**
 * Rounds a body to float32 at its place on the bed. Rounding can fold short edges together, so when
 * the result is not closed, falls apart, or loses volume, places a few micrometres away are tried;
 * the pose itself never changes, and the piece stays inside the build space. Returns the soundest
 * result found; never throws for a body that no place helps.
 */
export function roundOnBed(body: TriangleMesh, pose: BedPose, space: BuildSpace): RoundedPiece {
  const volumeMm3 = signedVolume(body);
  const { count: shells } = connectedShells(body);
  const placed = applyMotion(pose.motion, body.positions);
  const places = placesOnBed(boundingBox(placed), pose, space);
  let best: RoundedPiece | null = null;
  let leastError = Infinity;
  for (const place of places) {
    const motion = composeMotions(place, pose.motion);
    const positions = applyMotion(place, placed);
    for (let i = 0; i < positions.length; i++)
      if (Math.abs(positions[i]) < ZERO_MM) positions[i] = 0;
    const rounded = roundAndWeld({ ...body, positions }, identityMotion);
    const fault = faultOf(rounded, shells);
    if (fault !== '') {
      best ??= { motion, rounded, sound: false, fault };
      continue;
    }
    const error = Math.abs(roundedVolume(rounded) / volumeMm3 - 1);
    if (!best?.sound || error < leastError) {
      best = { motion, rounded, sound: true, fault: '' };
      leastError = error;
    }
    if (error <= VOLUME_SHARE) break;
  }
  return best!;
}

function faultOf({ report, indices }: RoundedMesh, shells: number): string {
  if (indices.length === 0) return 'nothing is left of it';
  if (!report.closed) {
    const count = report.openEdges + report.nonManifoldEdges + report.misorientedEdges;
    return `${count} edges do not close`;
  }
  const { count } = connectedShells({ indices });
  return count > shells ? `its surface falls into ${count} parts` : '';
}

function roundedVolume({ positions, indices }: RoundedMesh): number {
  return signedVolume({ positions: Float64Array.from(positions), indices });
}

/**
 * Motions on the bed: first none, then shifts spread by the R2 sequence (the golden ratio's relative
 * for the plane: M. Roberts, "The Unreasonable Effectiveness of Quasirandom Sequences", 2018), ever
 * farther, every second one after half a turn about the middle of the bed. A box that was inside the
 * space stays inside.
 */
function* placesOnBed(
  box: { min: readonly number[]; max: readonly number[] },
  pose: BedPose,
  space: BuildSpace,
): Generator<RigidMotion> {
  const round = space.shape === 'round';
  const limits = round ? [space.diameterMm, space.diameterMm] : [space.widthMm, space.depthMm];
  const farthest = round
    ? Math.min(FARTHEST_SHIFT_MM, Math.max(0, pose.slackMm))
    : FARTHEST_SHIFT_MM;
  for (let k = 0; k < PLACES_TRIED; k++) {
    const reach = farthest * (k / PLACES_TRIED) ** 2 * Math.SQRT1_2;
    const isTurned = k % 2 === 1;
    const shift = R2_STEPS.map((step, axis) => {
      const wanted = reach * (2 * ((0.5 + k * step) % 1) - 1);
      const low = isTurned ? limits[axis] - box.max[axis] : box.min[axis];
      const high = isTurned ? limits[axis] - box.min[axis] : box.max[axis];
      if (round) return wanted;
      return Math.max(-Math.max(0, low), Math.min(Math.max(0, limits[axis] - high), wanted));
    });
    yield isTurned
      ? [-1, 0, 0, limits[0] + shift[0], 0, -1, 0, limits[1] + shift[1], 0, 0, 1, 0]
      : [1, 0, 0, shift[0], 0, 1, 0, shift[1], 0, 0, 1, 0];
  }
}

const R2_STEPS = [0.7548776662466927, 0.5698402909980532];
