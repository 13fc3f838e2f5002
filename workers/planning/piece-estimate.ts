import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { gridCell } from '../../shared/geometry/fitting/space-measures.js';
import { signedVolume, surfaceArea } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A good plan's share of the cells that a surface of this area passes. Measured, rough. */
const PLANNED_SHARE = 0.65;

/**
 * A cautious estimate of the pieces a model needs, made from its volume and surface alone, so that
 * hopeless jobs end at once: solids fill spaces, walls pass through cells with both their sides.
 */
/** The spaces' least estimate: a piece may go to any. */
export function estimatePieces(mesh: TriangleMesh, spaces: readonly BuildSpace[]): number {
  return Math.min(...spaces.map((space) => estimateIn(mesh, space)));
}

function estimateIn(mesh: TriangleMesh, space: BuildSpace): number {
  const [width, depth, height] = gridCell(space);
  const filled = signedVolume(mesh) / (width * depth * height);
  const face = Math.max(width * depth, width * height, depth * height);
  const passed = (PLANNED_SHARE * surfaceArea(mesh)) / (2 * face);
  return Math.ceil(Math.max(filled, passed));
}
