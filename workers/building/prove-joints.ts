import { fromPlane } from '../../shared/geometry/sections/seam-plane.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type Piece } from '../../shared/jobs/plan-make.js';
import { type Move } from '../assembling/plan-assembly.js';
import { type SeamJoint } from '../jointing/plan-joints.js';
import {
  type ClaimedPin,
  type JointFindings,
  measureJoints,
  measureMoves,
  type MoveFindings,
} from '../proof/joint-proof.js';
import { readWrittenStl } from '../proof/read-written-stl.js';
import { WrittenSolid } from '../proof/written-solid.js';
import { type SeamRegion } from './seam-areas.js';

export interface JointClaims {
  readonly pieces: readonly Piece[];
  readonly seams: readonly SeamRegion[];
  readonly joints: readonly SeamJoint[];
  readonly moves: readonly Move[];
  readonly material: MaterialProfile;
  readonly enlargement: number;
}

/** Reads the written pieces again and measures joints and ways on them; nothing when there are neither. */
export async function proveJoints(
  { pieces, seams, joints, moves, material, enlargement }: JointClaims,
  read: (name: string) => Promise<Uint8Array>,
): Promise<{ joints?: JointFindings; leastSocketWallMm?: number; moves?: MoveFindings }> {
  const pins = claimedPins(seams, joints, material);
  if (pins.length === 0 && moves.length === 0) return {};
  const solids = new Map<string, WrittenSolid>();
  for (const { name, file, placement } of pieces) {
    const { corners } = readWrittenStl(await read(file));
    solids.set(name, new WrittenSolid(corners, placement, enlargement));
  }
  return {
    joints: measureJoints(solids, pins),
    leastSocketWallMm: Math.max(0.8, 2 * material.lineWidthMm),
    moves: measureMoves(solids, moves),
  };
}

/** Every socket of a plan; a fixed pin has one, a loose pin or a rod two. */
function claimedPins(
  seams: readonly SeamRegion[],
  joints: readonly SeamJoint[],
  { clearances }: MaterialProfile,
): ClaimedPin[] {
  return seams.flatMap(({ above, below, plane, normal }, k) =>
    joints[k].pins.flatMap((pin) => {
      const at = fromPlane(plane, pin.x, pin.y);
      const down: Vector3 = [0 - normal[0], 0 - normal[1], 0 - normal[2]];
      const common = { at, radiusMm: pin.diameterMm / 2, gapMm: clearances.locatingMm / 2 };
      const upper = { ...common, piece: above, into: normal, depthMm: pin.depthsMm[0] };
      const lower = { ...common, piece: below, into: down, depthMm: pin.depthsMm[1] };
      return joints[k].kind === 'fixed-pin' ? [upper] : [upper, lower];
    }),
  );
}
