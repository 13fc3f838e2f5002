import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { signedFan } from './signed-fan.js';

/** Loops with more points than this get fans: clipping ears costs the square of their number. */
const MOST_POINTS = 600;

/**
 * Caps for trial cuts by clipping ears: real triangles for almost all loops, at the cost of a
 * trial. Whatever happens, each loop edge is a border exactly once and signed areas add up, so a
 * trial part stays closed and its volume right: where no ear is found any corner is clipped. No
 * point is left out, collinear or not.
 * @param loops flat xy, outers counter-clockwise, holes clockwise
 */
export const trialCaps: PolygonTriangulator = (loops) => {
  let points = 0;
  for (const loop of loops) points += loop.length / 2;
  if (points > MOST_POINTS) return signedFan(loops);
  const xy = new Float64Array(2 * points);
  const outers: Outline[] = [];
  const holes: Outline[] = [];
  let first = 0;
  for (const loop of loops) {
    xy.set(loop, 2 * first);
    const count = loop.length / 2;
    const corners = Array.from({ length: count }, (_, k) => first + k);
    first += count;
    if (count < 3) continue;
    const area = signedArea(xy, corners);
    (area >= 0 ? outers : holes).push({ corners, area });
  }
  // The smallest outline that holds a hole is its own; the holes nearest its side come first.
  outers.sort((a, b) => a.area - b.area);
  const found: number[] = [];
  const owned = new Map<Outline, Outline[]>();
  for (const hole of holes) {
    const at = hole.corners[0];
    const owner = outers.find(({ corners }) => holds(xy, corners, xy[2 * at], xy[2 * at + 1]));
    if (owner) owned.set(owner, [...(owned.get(owner) ?? []), hole]);
    else clipEars(xy, hole.corners, found);
  }
  for (const outer of outers) {
    let corners = outer.corners;
    for (const hole of owned.get(outer) ?? []) corners = joinHole(xy, corners, hole.corners);
    clipEars(xy, corners, found);
  }
  return Uint32Array.from(found);
};

interface Outline {
  readonly corners: number[];
  readonly area: number;
}

function signedArea(xy: Float64Array, corners: readonly number[]): number {
  let doubled = 0;
  for (let k = 0; k < corners.length; k++) {
    const a = 2 * corners[k];
    const b = 2 * corners[(k + 1) % corners.length];
    doubled += xy[a] * xy[b + 1] - xy[b] * xy[a + 1];
  }
  return doubled / 2;
}

function holds(xy: Float64Array, corners: readonly number[], x: number, y: number): boolean {
  let isIn = false;
  for (let k = 0, j = corners.length - 1; k < corners.length; j = k++) {
    const a = 2 * corners[k];
    const b = 2 * corners[j];
    if (xy[a + 1] > y === xy[b + 1] > y) continue;
    const at = ((xy[b] - xy[a]) * (y - xy[a + 1])) / (xy[b + 1] - xy[a + 1]) + xy[a];
    if (x < at) isIn = !isIn;
  }
  return isIn;
}

/** One outline of both, by a bridge between the two corners nearest to each other: it crosses nothing. */
function joinHole(xy: Float64Array, outer: readonly number[], hole: readonly number[]): number[] {
  let best = Infinity;
  let from = 0;
  let to = 0;
  for (let i = 0; i < outer.length; i++)
    for (let j = 0; j < hole.length; j++) {
      const x = xy[2 * outer[i]] - xy[2 * hole[j]];
      const y = xy[2 * outer[i] + 1] - xy[2 * hole[j] + 1];
      const far = x * x + y * y;
      if (far < best) {
        best = far;
        from = i;
        to = j;
      }
    }
  return [
    ...outer.slice(0, from + 1),
    ...hole.slice(to),
    ...hole.slice(0, to + 1),
    ...outer.slice(from),
  ];
}

function clipEars(xy: Float64Array, corners: readonly number[], found: number[]): void {
  const count = corners.length;
  const next = new Int32Array(count);
  const before = new Int32Array(count);
  for (let k = 0; k < count; k++) {
    next[k] = (k + 1) % count;
    before[k] = (k + count - 1) % count;
  }
  let at = 0;
  let left = count;
  let misses = 0;
  while (left > 3) {
    const a = before[at];
    const b = next[at];
    if (misses < left && !isEar(xy, corners, next, a, at, b)) {
      at = b;
      misses++;
      continue;
    }
    found.push(corners[a], corners[at], corners[b]);
    next[a] = b;
    before[b] = a;
    left--;
    misses = 0;
    // Going on past the next corner keeps the triangles from becoming slivers.
    at = next[b];
  }
  found.push(corners[before[at]], corners[at], corners[next[at]]);
}

/** Whether a corner turns left and no other corner lies inside the triangle it would take away. */
function isEar(
  xy: Float64Array,
  corners: readonly number[],
  next: Int32Array,
  a: number,
  ear: number,
  b: number,
): boolean {
  const ax = xy[2 * corners[a]];
  const ay = xy[2 * corners[a] + 1];
  const ex = xy[2 * corners[ear]];
  const ey = xy[2 * corners[ear] + 1];
  const bx = xy[2 * corners[b]];
  const by = xy[2 * corners[b] + 1];
  if ((ex - ax) * (by - ay) - (ey - ay) * (bx - ax) <= 0) return false;
  for (let k = next[b]; k !== a; k = next[k]) {
    const x = xy[2 * corners[k]];
    const y = xy[2 * corners[k] + 1];
    if ((ex - ax) * (y - ay) - (ey - ay) * (x - ax) < 0) continue;
    if ((bx - ex) * (y - ey) - (by - ey) * (x - ex) < 0) continue;
    if ((ax - bx) * (y - by) - (ay - by) * (x - bx) < 0) continue;
    // The two ends of a bridge are the same point twice.
    if ((x === ax && y === ay) || (x === bx && y === by) || (x === ex && y === ey)) continue;
    return false;
  }
  return true;
}
