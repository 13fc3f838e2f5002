import { matesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Crease, CREASE_SHARE } from './creases.js';
import { type SurfaceWorth } from './surface-worth.js';

/** Where the seams of one cut come to the surface. */
export interface SeamSegments {
  /** By the worth of the surface, creases counted half, mm. */
  readonly sightMm: number;
  readonly outlineMm: number;
  readonly creaseMm: number;
}

/** A seam this near to a crease follows it, mm. */
const CREASE_REACH_MM = 0.6;
/** … when it runs along it (cosine). */
const ALONG = 0.94;

/**
 * The lines in which caps meet the model's own surface, cut by cut: each is the border of two
 * pieces, so it is counted half from either.
 * @param bodies exact pieces, tagged; @param cuts how many there are
 */
export function seamCost(
  bodies: readonly TriangleMesh[],
  cuts: number,
  worth: SurfaceWorth,
): SeamSegments[] {
  const sums = Array.from({ length: cuts }, () => ({ sightMm: 0, outlineMm: 0, creaseMm: 0 }));
  for (const mesh of bodies) {
    const { positions: p, indices, tags } = mesh;
    if (!tags) continue;
    const { mates } = matesOf(mesh);
    for (let side = 0; side < indices.length; side++) {
      const tag = tags[Math.floor(side / 3)];
      if (tag <= 0 || tag > cuts) continue;
      const mate = mates[side];
      // Where two caps meet there is no surface.
      if (mate < 0 || tags[Math.floor(mate / 3)] > 0) continue;
      const a = 3 * indices[side];
      const b = 3 * indices[side % 3 === 2 ? side - 2 : side + 1];
      const [dx, dy, dz] = [p[b] - p[a], p[b + 1] - p[a + 1], p[b + 2] - p[a + 2]];
      const length = Math.hypot(dx, dy, dz);
      if (length === 0) continue;
      const x = (p[a] + p[b]) / 2;
      const y = (p[a + 1] + p[b + 1]) / 2;
      const z = (p[a + 2] + p[b + 2]) / 2;
      const isCrease = followsCrease(worth.creases, x, y, z, dx / length, dy / length, dz / length);
      const sum = sums[tag - 1];
      sum.outlineMm += length / 2;
      if (isCrease) sum.creaseMm += length / 2;
      sum.sightMm += ((isCrease ? CREASE_SHARE : 1) * worth.at(x, y, z) * length) / 2;
    }
  }
  return sums;
}

function followsCrease(
  creases: readonly Crease[],
  x: number,
  y: number,
  z: number,
  dx: number,
  dy: number,
  dz: number,
): boolean {
  for (const { from, to, lengthMm } of creases) {
    const ux = (to[0] - from[0]) / lengthMm;
    const uy = (to[1] - from[1]) / lengthMm;
    const uz = (to[2] - from[2]) / lengthMm;
    if (Math.abs(ux * dx + uy * dy + uz * dz) < ALONG) continue;
    const [px, py, pz] = [x - from[0], y - from[1], z - from[2]];
    const along = px * ux + py * uy + pz * uz;
    if (along < -CREASE_REACH_MM || along > lengthMm + CREASE_REACH_MM) continue;
    const off = px * px + py * py + pz * pz - along * along;
    if (off <= CREASE_REACH_MM * CREASE_REACH_MM) return true;
  }
  return false;
}
