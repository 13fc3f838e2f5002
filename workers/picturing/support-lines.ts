import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { heldColumns } from '../../shared/geometry/support/column-support.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type Piece } from '../../shared/jobs/plan-make.js';

/** Columns across a piece in a picture, and their least distance, mm. */
const COLUMNS = 60;
const FINEST_MM = 2.5;

/**
 * The support of a piece as it lies, as lines from foot to head in the assembled model, under the
 * name that the viewer looks for. Nothing for a piece that needs none.
 */
export function supportLines(
  { name, orientations }: Piece,
  mesh: TriangleMesh,
  { overhangDegrees, bridgeMm }: MaterialProfile,
): { name: string; positions: Float32Array }[] {
  const used = orientations[0];
  if (!used || used.supportMm3 === 0) return [];
  const up: Vector3 = [0 - used.down[0], 0 - used.down[1], 0 - used.down[2]];
  const pitchMm = Math.max(FINEST_MM, Math.max(...boundingBox(mesh.positions).size) / COLUMNS);
  const { columns, u, v } = heldColumns({ mesh, up, pitchMm, overhangDegrees, bridgeMm });
  const positions = new Float32Array((6 * columns.length) / 4);
  for (let k = 0, at = 0; k < columns.length; k += 4)
    for (const end of [2, 3])
      for (let axis = 0; axis < 3; axis++)
        positions[at++] =
          columns[k] * u[axis] + columns[k + 1] * v[axis] + columns[k + end] * up[axis];
  return positions.length > 0 ? [{ name: `support-${name}`, positions }] : [];
}
