import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { Hole } from '../mending/mending.js';

/**
 * What an oriented surface would enclose were its rims closed flat: the volume under its facets plus
 * a fan from the middle of each rim. Cubic file units, never negative. For a closed surface it is the
 * volume. The fan runs against the rim, as a cap that faces outward does.
 */
export function volumeWithFlatRims(mesh: TriangleMesh, holes: readonly Hole[]): number {
  const [ox, oy, oz] = mesh.positions;
  let sixfold = 0;
  for (const { rim } of holes) {
    const count = rim.length / 3;
    let cx = 0;
    let cy = 0;
    let cz = 0;
    for (let i = 0; i < rim.length; i += 3) {
      cx += (rim[i] - ox) / count;
      cy += (rim[i + 1] - oy) / count;
      cz += (rim[i + 2] - oz) / count;
    }
    for (let i = 0; i < rim.length; i += 3) {
      const j = (i + 3) % rim.length;
      const ax = rim[j] - ox;
      const ay = rim[j + 1] - oy;
      const az = rim[j + 2] - oz;
      const bx = rim[i] - ox;
      const by = rim[i + 1] - oy;
      const bz = rim[i + 2] - oz;
      sixfold += ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
    }
  }
  return Math.abs(signedVolume(mesh) + sixfold / 6);
}
