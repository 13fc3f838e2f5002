import { loopArea } from '../cutting/section-cap.js';

/** What positive triangles may leave or cover twice of the area between, as a share of it. */
const AREA_TOLERANCE = 1e-6;

/**
 * Fills the strip between outlines and the same outlines shrunken by walking along both at once,
 * each time taking the shorter step across: nearly free, where an ear clipper looks at every point.
 * @param outer flat xy loops with the region on their left
 * @param inner as many loops in the same directions, each within the strip of its partner
 * @returns counter-clockwise triples into outer's points followed by inner's in reverse, loop by loop
 *   (the order in which a triangulator would get them), or null where the walk does not tile the
 *   strip: a triangle that is turned over, or a sum of areas that is not the strip's
 */
export function zipLoops(
  outer: readonly Float64Array[],
  inner: readonly Float64Array[],
): Uint32Array | null {
  if (outer.length !== inner.length) return null;
  const partners = pairLoops(outer, inner);
  if (!partners) return null;
  const outerStarts = startsOf(outer, 0);
  const innerStarts = startsOf(inner, outerStarts[outer.length]);
  const corners: number[] = [];
  let area = 0;
  for (const [k, loop] of outer.entries()) {
    const partner = partners[k];
    const walked = zipPair(loop, inner[partner]);
    if (!walked) return null;
    const points = inner[partner].length / 2;
    area += walked.area;
    for (const corner of walked.corners)
      corners.push(
        corner >= 0
          ? outerStarts[k] + corner
          : // −1 − j is point j of the inner loop, which is handed on reversed.
            innerStarts[partner] + points - 1 - (-1 - corner),
      );
  }
  const sum = (loops: readonly Float64Array[]) =>
    loops.reduce((total, loop) => total + loopArea(loop), 0);
  const wanted = sum(outer) - sum(inner);
  return Math.abs(area - wanted) <= AREA_TOLERANCE * Math.abs(wanted) + 1e-9
    ? Uint32Array.from(corners)
    : null;
}

/** For each outer loop the inner one that begins nearest to it; null when two want the same. */
function pairLoops(
  outer: readonly Float64Array[],
  inner: readonly Float64Array[],
): number[] | null {
  if (outer.length === 1) return [0];
  const partners = outer.map((loop) => {
    let best = 0;
    let least = Infinity;
    for (const [k, other] of inner.entries()) {
      if (loopArea(loop) > 0 !== loopArea(other) > 0) continue;
      const distance = nearest(loop, other[0], other[1]).distance;
      if (distance < least) [least, best] = [distance, k];
    }
    return best;
  });
  return new Set(partners).size === partners.length ? partners : null;
}

function zipPair(a: Float64Array, b: Float64Array): { corners: number[]; area: number } | null {
  const [n, m] = [a.length / 2, b.length / 2];
  const start = nearest(b, a[0], a[1]).at;
  const corners: number[] = [];
  let area = 0;
  let i = 0;
  let j = 0;
  while (i < n || j < m) {
    const ai = i % n;
    const an = (i + 1) % n;
    const bj = (start + j) % m;
    const bn = (start + j + 1) % m;
    const alongA = i < n ? squared(a, an, b, bj) : Infinity;
    const alongB = j < m ? squared(a, ai, b, bn) : Infinity;
    const isAlongA = alongA <= alongB;
    const twice = isAlongA
      ? turn(a[2 * ai], a[2 * ai + 1], a[2 * an], a[2 * an + 1], b[2 * bj], b[2 * bj + 1])
      : turn(a[2 * ai], a[2 * ai + 1], b[2 * bn], b[2 * bn + 1], b[2 * bj], b[2 * bj + 1]);
    if (!(twice > 0)) return null;
    area += twice / 2;
    if (isAlongA) {
      corners.push(ai, an, -1 - bj);
      i++;
    } else {
      corners.push(ai, -1 - bn, -1 - bj);
      j++;
    }
  }
  return { corners, area };
}

function nearest(loop: Float64Array, x: number, y: number): { at: number; distance: number } {
  let at = 0;
  let distance = Infinity;
  for (let k = 0; k < loop.length; k += 2) {
    const off = Math.hypot(loop[k] - x, loop[k + 1] - y);
    if (off < distance) [distance, at] = [off, k / 2];
  }
  return { at, distance };
}

function squared(a: Float64Array, i: number, b: Float64Array, j: number): number {
  const dx = a[2 * i] - b[2 * j];
  const dy = a[2 * i + 1] - b[2 * j + 1];
  return dx * dx + dy * dy;
}

function turn(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  return (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);
}

function startsOf(loops: readonly Float64Array[], first: number): number[] {
  const starts = [first];
  for (const loop of loops) starts.push(starts[starts.length - 1] + loop.length / 2);
  return starts;
}
