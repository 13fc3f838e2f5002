import { type CapFrame } from '../../shared/geometry/features/cap-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A disc on a cap, mm in the cap's coordinates. */
export interface Disc {
  readonly x: number;
  readonly y: number;
  readonly radiusMm: number;
}

/** Walls that stand on a face's very edge must not be missed by rounding, mm. */
const BESIDE_MM = 2;

/**
 * What of a body lies near one of its caps, in the cap's coordinates with the depth below it: made
 * once, asked for many discs. O(vertices + triangles) to make, O(near triangles · discs) to ask.
 */
export class NearCap {
  /** Nine numbers a triangle: x, y, depth of its corners. */
  private readonly corners: number[] = [];

  /**
   * @param tag of the cap's own triangles, which are left out
   * @param deepestMm what lies deeper is not looked at
   * @param within flat xy of points; what lies beside their box is not looked at. Absent: all is
   */
  constructor(
    { positions: p, indices, tags }: TriangleMesh,
    tag: number,
    { origin, u, v, outward }: CapFrame,
    private readonly deepestMm: number,
    within?: Float64Array,
  ) {
    const box = within ? boundsOf(within, BESIDE_MM) : null;
    const count = p.length / 3;
    const zs = new Float64Array(count);
    for (let k = 0, at = 0; k < count; k++, at += 3)
      zs[k] =
        (origin[0] - p[at]) * outward[0] +
        (origin[1] - p[at + 1]) * outward[1] +
        (origin[2] - p[at + 2]) * outward[2];
    const along = (axis: Vector3, at: number) =>
      (p[at] - origin[0]) * axis[0] +
      (p[at + 1] - origin[1]) * axis[1] +
      (p[at + 2] - origin[2]) * axis[2];
    for (let t = 0; t < indices.length; t += 3) {
      const a = indices[t];
      const b = indices[t + 1];
      const c = indices[t + 2];
      if (zs[a] >= deepestMm && zs[b] >= deepestMm && zs[c] >= deepestMm) continue;
      if (tags && tags[t / 3] === tag) continue;
      const [ax, bx, cx] = [along(u, 3 * a), along(u, 3 * b), along(u, 3 * c)];
      const [ay, by, cy] = [along(v, 3 * a), along(v, 3 * b), along(v, 3 * c)];
      if (
        box &&
        (Math.min(ax, bx, cx) > box.maxX ||
          Math.max(ax, bx, cx) < box.minX ||
          Math.min(ay, by, cy) > box.maxY ||
          Math.max(ay, by, cy) < box.minY)
      )
        continue;
      this.corners.push(ax, ay, zs[a], bx, by, zs[b], cx, cy, zs[c]);
    }
  }

  /**
   * How deep below each disc the body is solid, mm: the least depth at which any of its triangles
   * but those of the cap itself comes into the disc's cylinder. Exact for the triangles as they
   * are; discs are taken to lie on the cap. Never more than the depth that was looked at.
   */
  depths(discs: readonly Disc[]): Float64Array {
    const depths = new Float64Array(discs.length).fill(this.deepestMm);
    const all = this.corners;
    for (let t = 0; t < all.length; t += 9) {
      const least = Math.min(all[t + 2], all[t + 5], all[t + 8]);
      const left = Math.min(all[t], all[t + 3], all[t + 6]);
      const right = Math.max(all[t], all[t + 3], all[t + 6]);
      const low = Math.min(all[t + 1], all[t + 4], all[t + 7]);
      const high = Math.max(all[t + 1], all[t + 4], all[t + 7]);
      for (let k = 0; k < discs.length; k++) {
        if (least >= depths[k]) continue;
        const { x, y, radiusMm } = discs[k];
        if (left > x + radiusMm || right < x - radiusMm) continue;
        if (low > y + radiusMm || high < y - radiusMm) continue;
        const depth = leastInside(all, t, discs[k]);
        if (depth < depths[k]) depths[k] = Math.max(0, depth);
      }
    }
    return depths;
  }
}

/**
 * Least third coordinate of the points of a triangle within a disc's cylinder; Infinity when there
 * are none. A linear function on a convex set is least at one of: a corner inside, where an edge
 * meets the circle, or the point of the circle downhill from its middle.
 */
function leastInside(all: readonly number[], from: number, { x, y, radiusMm }: Disc): number {
  const t = (k: number) => all[from + k];
  let least = Infinity;
  const square = radiusMm * radiusMm;
  for (let k = 0; k < 9; k += 3) {
    const ax = t(k) - x;
    const ay = t(k + 1) - y;
    const az = t(k + 2);
    const n = (k + 3) % 9;
    const dx = t(n) - x - ax;
    const dy = t(n + 1) - y - ay;
    const dz = t(n + 2) - az;
    const c = ax * ax + ay * ay - square;
    if (c <= 0 && az < least) least = az;
    const a = dx * dx + dy * dy;
    const b = ax * dx + ay * dy;
    const root = b * b - a * c;
    if (a === 0 || root < 0) continue;
    for (const sign of [-1, 1]) {
      const s = (-b + sign * Math.sqrt(root)) / a;
      if (s >= 0 && s <= 1) least = Math.min(least, az + s * dz);
    }
  }
  const ux = t(3) - t(0);
  const uy = t(4) - t(1);
  const uz = t(5) - t(2);
  const vx = t(6) - t(0);
  const vy = t(7) - t(1);
  const vz = t(8) - t(2);
  const twice = ux * vy - uy * vx;
  if (twice === 0) return least;
  const slopeX = (uz * vy - uy * vz) / twice;
  const slopeY = (ux * vz - uz * vx) / twice;
  const slope = Math.hypot(slopeX, slopeY);
  const px = slope > 0 ? x - (radiusMm * slopeX) / slope : x;
  const py = slope > 0 ? y - (radiusMm * slopeY) / slope : y;
  const first = ((px - t(0)) * vy - (py - t(1)) * vx) / twice;
  const second = (ux * (py - t(1)) - uy * (px - t(0))) / twice;
  if (first >= 0 && second >= 0 && first + second <= 1)
    least = Math.min(least, t(2) + first * uz + second * vz);
  return least;
}

function boundsOf(points: Float64Array, byMm: number) {
  const box = { minX: Infinity, maxX: -Infinity, minY: Infinity, maxY: -Infinity };
  for (let k = 0; k < points.length; k += 2) {
    box.minX = Math.min(box.minX, points[k] - byMm);
    box.maxX = Math.max(box.maxX, points[k] + byMm);
    box.minY = Math.min(box.minY, points[k + 1] - byMm);
    box.maxY = Math.max(box.maxY, points[k + 1] + byMm);
  }
  return box;
}
