import cdt2d from 'cdt2d';
import { orient2d } from 'robust-predicates';
import { type Segment, type SurfacePoints, TieError } from './surface-points.js';

/**
 * Divides a triangle along the segments in which others cross it. Returns corner numbers, three a
 * part, wound as the triangle is; every segment is an edge of the parts, and the points that lie on
 * the triangle's own edges are corners. Throws a TieError when the division does not cover it.
 * @param onEdges points inside the edges from corner k to the next one, in any order
 * @param segments already divided where they meet
 */
export function splitTriangle(
  points: SurfacePoints,
  corners: readonly [number, number, number],
  onEdges: readonly (readonly number[])[],
  segments: readonly Segment[],
): number[] {
  const numbers: number[] = [];
  const placeOf = new Map<number, number>();
  const place = (point: number): number => {
    const known = placeOf.get(point);
    if (known !== undefined) return known;
    placeOf.set(point, numbers.length);
    return numbers.push(point) - 1;
  };
  const edges: [number, number][] = [];
  /** Points of each side in order, corners included. */
  const chains: Map<number, number>[] = [];
  for (let side = 0; side < 3; side++) {
    const [from, to] = [corners[side], corners[(side + 1) % 3]];
    const between = [...new Set(onEdges[side])]
      .map((point) => ({ point, share: points.share([from, to], points.at(point)) }))
      .sort((a, b) => a.share - b.share);
    const chain = [from, ...between.map(({ point }) => point), to];
    chains.push(new Map(chain.map((point, at) => [place(point), at])));
    let last = from;
    for (const { point } of between) {
      edges.push([place(last), place(point)]);
      last = point;
    }
    edges.push([place(last), place(to)]);
  }
  for (const [from, to] of segments) edges.push([place(from), place(to)]);
  const flat = flatten(points, corners, numbers);
  const parts = cdt2d(flat, withoutCopies(edges), {});
  const found: number[] = [];
  let covered = 0;
  for (const [a, b, c] of parts) {
    const turn = turnOf(flat[a], flat[b], flat[c]);
    if (turn === 0) throw new TieError('A part without area.');
    const [second, third] = turn > 0 ? [b, c] : [c, b];
    if (isBeyond(chains, a, second, third)) continue;
    covered += Math.abs(doubleArea(flat[a], flat[b], flat[c]));
    found.push(numbers[a], numbers[second], numbers[third]);
  }
  const [p, q, r] = corners.map((corner) => flat[place(corner)]);
  const whole = Math.abs(doubleArea(p, q, r));
  if (!(Math.abs(covered - whole) <= COVER_SHARE * whole)) throw new TieError('Not covered.');
  return found;
}

/**
 * Whether a part lies outside the triangle: rounding puts points of a side a little off its line,
 * and where they are within it the hull has a sliver beyond. Its corners, counter-clockwise, then
 * run against the side.
 */
function isBeyond(
  chains: readonly Map<number, number>[],
  a: number,
  b: number,
  c: number,
): boolean {
  return chains.some((chain) => {
    const [i, j, k] = [chain.get(a), chain.get(b), chain.get(c)];
    if (i === undefined || j === undefined || k === undefined) return false;
    const isAlong = (i < j && j < k) || (j < k && k < i) || (k < i && i < j);
    return !isAlong;
  });
}

/** Above 0 counter-clockwise; exact. */
function turnOf(a: [number, number], b: [number, number], c: [number, number]): number {
  // The library counts clockwise as positive.
  return -orient2d(a[0], a[1], b[0], b[1], c[0], c[1]);
}

/** Rounding of coordinates may cost this share of a triangle's area. */
const COVER_SHARE = 1e-6;

function doubleArea(a: [number, number], b: [number, number], c: [number, number]): number {
  return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
}

/** The points in a frame of the triangle, its sides about 1, so that counter-clockwise is its winding. */
function flatten(
  points: SurfacePoints,
  corners: readonly [number, number, number],
  numbers: readonly number[],
): [number, number][] {
  const [a, b, c] = corners.map((corner) => points.at(corner));
  const u = b.map((x, axis) => x - a[axis]);
  const w = c.map((x, axis) => x - a[axis]);
  const uu = dot(u, u);
  const uw = dot(u, w);
  const ww = dot(w, w);
  const det = uu * ww - uw * uw;
  if (!(det > 0)) throw new TieError('A triangle without area is crossed.');
  // Barycentric coordinates: they keep straight lines straight and the winding as it is.
  return numbers.map((number) => {
    const p = points.at(number).map((x, axis) => x - a[axis]);
    const pu = dot(p, u);
    const pw = dot(p, w);
    return [(ww * pu - uw * pw) / det, (uu * pw - uw * pu) / det];
  });
}

function dot(a: readonly number[], b: readonly number[]): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

function withoutCopies(edges: readonly [number, number][]): [number, number][] {
  const seen = new Set<string>();
  return edges.filter(([a, b]) => {
    const key = a < b ? `${a} ${b}` : `${b} ${a}`;
    return a !== b && !seen.has(key) && seen.add(key);
  });
}
