/**
 * Convex hull of points in the plane, counter-clockwise, without the points that lie on its edges.
 *
 * Points strictly inside the octagon of the extremes along eight directions are dropped first
 * (Akl and Toussaint, Information Processing Letters 7(5), 1978), then Andrew's monotone chain.
 * @param points flat xy, mm, length 2 × count
 * @returns flat xy of the hull; fewer than three points when all points coincide or lie on a line.
 * Not mutated: `points`. Cost O(n + m log m), m the points that pass the filter.
 */
export function convexHull2d(points: Float64Array): Float64Array {
  const kept = outsideOctagon(points);
  const count = kept.length;
  if (count === 0) return new Float64Array(0);
  kept.sort((a, b) => points[2 * a] - points[2 * b] || points[2 * a + 1] - points[2 * b + 1]);
  const chain = new Int32Array(2 * count + 1);
  let size = 0;
  for (let k = 0; k < count; k++) {
    size = retreat(points, chain, size, 0, kept[k]);
    chain[size++] = kept[k];
  }
  const lower = size - 1;
  for (let k = count - 2; k >= 0; k--) {
    size = retreat(points, chain, size, lower, kept[k]);
    chain[size++] = kept[k];
  }
  // The chain closes on its first point.
  const corners = count === 1 ? 1 : size - 1;
  const hull = new Float64Array(2 * corners);
  for (let k = 0; k < corners; k++) {
    hull[2 * k] = points[2 * chain[k]];
    hull[2 * k + 1] = points[2 * chain[k] + 1];
  }
  return corners === 2 && hull[0] === hull[2] && hull[1] === hull[3] ? hull.slice(0, 2) : hull;
}

/** Takes points off the end of the chain until the step to `next` turns left. */
function retreat(
  points: Float64Array,
  chain: Int32Array,
  size: number,
  floor: number,
  next: number,
): number {
  const x = points[2 * next];
  const y = points[2 * next + 1];
  while (size >= floor + 2) {
    const a = chain[size - 2];
    const b = chain[size - 1];
    const ax = points[2 * a];
    const ay = points[2 * a + 1];
    const turn = (points[2 * b] - ax) * (y - ay) - (points[2 * b + 1] - ay) * (x - ax);
    if (turn > 0) break;
    size--;
  }
  return size;
}

/** Below this many points the filter costs more than it saves. */
const FILTER_FROM = 24;
const OCTAGON_X = [1, 1, 0, -1, -1, -1, 0, 1];
const OCTAGON_Y = [0, 1, 1, 1, 0, -1, -1, -1];

function outsideOctagon(points: Float64Array): Uint32Array {
  const count = points.length / 2;
  if (count < FILTER_FROM) return Uint32Array.from({ length: count }, (_, k) => k);
  const extremes = new Int32Array(8);
  const best = new Float64Array(8).fill(-Infinity);
  for (let k = 0; k < count; k++) {
    const x = points[2 * k];
    const y = points[2 * k + 1];
    for (let side = 0; side < 8; side++) {
      const reach = OCTAGON_X[side] * x + OCTAGON_Y[side] * y;
      if (reach > best[side]) {
        best[side] = reach;
        extremes[side] = k;
      }
    }
  }
  const ringX = new Float64Array(9);
  const ringY = new Float64Array(9);
  let corners = 0;
  for (let k = 0; k < 8; k++) {
    if (corners > 0 && extremes[k] === extremes[(k + 7) % 8]) continue;
    ringX[corners] = points[2 * extremes[k]];
    ringY[corners++] = points[2 * extremes[k] + 1];
  }
  ringX[corners] = ringX[0];
  ringY[corners] = ringY[0];
  const kept = new Uint32Array(count);
  let size = 0;
  for (let k = 0; k < count; k++) {
    const x = points[2 * k];
    const y = points[2 * k + 1];
    let inside = corners >= 3;
    for (let c = 0; inside && c < corners; c++) {
      const turn =
        (ringX[c + 1] - ringX[c]) * (y - ringY[c]) - (ringY[c + 1] - ringY[c]) * (x - ringX[c]);
      inside = turn > 0;
    }
    if (!inside) kept[size++] = k;
  }
  return kept.slice(0, size);
}
