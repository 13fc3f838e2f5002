import { type CapFrame } from '../../shared/geometry/features/cap-frame.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A disc on a cap, mm in the cap's coordinates. */
export interface Disc {
  readonly x: number;
  readonly y: number;
  readonly radiusMm: number;
}

/**
 * How deep below each disc the body is solid, mm: the least depth at which any of its triangles
 * but those of the cap itself comes into the disc's cylinder. Exact for the triangles as they are;
 * discs are taken to lie on the cap. Never more than `deepestMm`. O(triangles + near triangles ·
 * discs).
 * @param tag of the cap's triangles
 */
export function solidDepths(
  { positions: p, indices, tags }: TriangleMesh,
  tag: number,
  { origin, u, v, outward }: CapFrame,
  discs: readonly Disc[],
  deepestMm: number,
): Float64Array {
  const depths = new Float64Array(discs.length).fill(deepestMm);
  if (discs.length === 0) return depths;
  const near = boundsOf(discs);
  const count = p.length / 3;
  const xs = new Float64Array(count);
  const ys = new Float64Array(count);
  const zs = new Float64Array(count);
  for (let k = 0, at = 0; k < count; k++, at += 3) {
    const x = p[at] - origin[0];
    const y = p[at + 1] - origin[1];
    const z = p[at + 2] - origin[2];
    xs[k] = x * u[0] + y * u[1] + z * u[2];
    ys[k] = x * v[0] + y * v[1] + z * v[2];
    zs[k] = -(x * outward[0] + y * outward[1] + z * outward[2]);
  }
  for (let t = 0; t < indices.length; t += 3) {
    if (tags && tags[t / 3] === tag) continue;
    const a = indices[t];
    const b = indices[t + 1];
    const c = indices[t + 2];
    const least = Math.min(zs[a], zs[b], zs[c]);
    if (least >= deepestMm) continue;
    if (Math.min(xs[a], xs[b], xs[c]) > near.maxX || Math.max(xs[a], xs[b], xs[c]) < near.minX)
      continue;
    if (Math.min(ys[a], ys[b], ys[c]) > near.maxY || Math.max(ys[a], ys[b], ys[c]) < near.minY)
      continue;
    const triangle: Corners = [xs[a], ys[a], zs[a], xs[b], ys[b], zs[b], xs[c], ys[c], zs[c]];
    for (let k = 0; k < discs.length; k++) {
      if (least >= depths[k]) continue;
      const depth = leastInside(triangle, discs[k]);
      if (depth < depths[k]) depths[k] = Math.max(0, depth);
    }
  }
  return depths;
}

type Corners = readonly [number, number, number, number, number, number, number, number, number];

/**
 * Least third coordinate of the points of a triangle within a disc's cylinder; Infinity when there
 * are none. A linear function on a convex set is least at one of: a corner inside, where an edge
 * meets the circle, or the point of the circle downhill from its middle.
 */
function leastInside(t: Corners, { x, y, radiusMm }: Disc): number {
  let least = Infinity;
  const square = radiusMm * radiusMm;
  for (let k = 0; k < 9; k += 3) {
    const ax = t[k] - x;
    const ay = t[k + 1] - y;
    const az = t[k + 2];
    const n = (k + 3) % 9;
    const dx = t[n] - x - ax;
    const dy = t[n + 1] - y - ay;
    const dz = t[n + 2] - az;
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
  const ux = t[3] - t[0];
  const uy = t[4] - t[1];
  const uz = t[5] - t[2];
  const vx = t[6] - t[0];
  const vy = t[7] - t[1];
  const vz = t[8] - t[2];
  const twice = ux * vy - uy * vx;
  if (twice === 0) return least;
  const slopeX = (uz * vy - uy * vz) / twice;
  const slopeY = (ux * vz - uz * vx) / twice;
  const slope = Math.hypot(slopeX, slopeY);
  const px = slope > 0 ? x - (radiusMm * slopeX) / slope : x;
  const py = slope > 0 ? y - (radiusMm * slopeY) / slope : y;
  const first = ((px - t[0]) * vy - (py - t[1]) * vx) / twice;
  const second = (ux * (py - t[1]) - uy * (px - t[0])) / twice;
  if (first >= 0 && second >= 0 && first + second <= 1)
    least = Math.min(least, t[2] + first * uz + second * vz);
  return least;
}

function boundsOf(discs: readonly Disc[]) {
  return {
    minX: Math.min(...discs.map((disc) => disc.x - disc.radiusMm)),
    maxX: Math.max(...discs.map((disc) => disc.x + disc.radiusMm)),
    minY: Math.min(...discs.map((disc) => disc.y - disc.radiusMm)),
    maxY: Math.max(...discs.map((disc) => disc.y + disc.radiusMm)),
  };
}
