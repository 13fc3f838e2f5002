import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { planeFrame } from '../../shared/geometry/vectors/plane-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { regionOf } from '../solids/regions.js';
import { type Solids } from '../solids/solid-kernel.js';
import { type Skin } from './find-skins.js';

/** How far a skin reaches into what is above and below it, mm. */
const INTO_MM = 0.05;

export interface SkinnedPiece {
  readonly mesh: TriangleMesh;
  readonly addedMm3: number;
  /** One sentence a skin, for the cut list. */
  readonly notes: readonly string[];
}

/**
 * Unites a piece with its skins through manifold-3d: each a wall from the foot to the head of the
 * support that it stands for. The result is closed; its tags are lost (cut faces are known
 * before). A piece that manifold-3d does not take stays as it is.
 * @param plateMm height of the plate along the build direction: nothing goes below it
 */
export function addSkins(
  solids: Solids,
  mesh: TriangleMesh,
  up: Vector3,
  skins: readonly Skin[],
  { skinMm, plateMm }: { skinMm: number; plateMm: number },
): SkinnedPiece {
  if (skins.length === 0) return { mesh, addedMm3: 0, notes: [] };
  const { u, v } = planeFrame(up);
  const united = solids.withSolids((scope) => {
    const soup = new scope.Mesh({
      numProp: 3,
      vertProperties: Float32Array.from(mesh.positions),
      triVerts: mesh.indices,
    });
    let piece = scope.keep(new scope.Manifold(soup));
    for (const { band, footMm, headMm } of skins) {
      const foot = Math.max(plateMm, footMm - INTO_MM);
      const wall = scope.keep(regionOf(scope, band).extrude(headMm + INTO_MM - foot));
      const raised = scope.keep(wall.translate([0, 0, foot]));
      // Columns of the frame: u, v, up.
      const placed = scope.keep(raised.transform([...u, 0, ...v, 0, ...up, 0, 0, 0, 0, 1]));
      piece = scope.keep(piece.add(placed));
    }
    const { vertProperties, triVerts, numProp } = piece.getMesh();
    const positions = new Float64Array((3 * vertProperties.length) / numProp);
    for (let k = 0, at = 0; k < vertProperties.length; k += numProp)
      for (let axis = 0; axis < 3; axis++) positions[at++] = vertProperties[k + axis];
    return { positions, indices: Uint32Array.from(triVerts) };
  });
  const notes = skins.map(
    ({ lengthMm, footMm, headMm }) =>
      `Skin of ${skinMm} mm across an opening of ${lengthMm.toFixed(0)} × ` +
      `${(headMm - footMm).toFixed(0)} mm: cut out after printing, blade away from the hand.`,
  );
  const addedMm3 = signedVolume(united) - signedVolume(mesh);
  return { mesh: united, addedMm3, notes };
}
