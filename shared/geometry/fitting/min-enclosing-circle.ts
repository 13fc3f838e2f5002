/** Room for rounding when asking whether a point is inside a circle, relative to its radius. */
const INSIDE_TOLERANCE = 1e-12;

export interface Circle {
  readonly x: number;
  readonly y: number;
  readonly radius: number;
}

/**
 * Smallest circle that holds all points, mm.
 *
 * Source: E. Welzl, "Smallest enclosing disks", 1991, in its iterative form; the order is a fixed
 * shuffle, so the same points give the same circle.
 * @param points flat xy, length 2 × count; hull corners suffice
 * @returns radius 0 for one point, radius -1 for none. Expected cost O(count).
 */
export function minEnclosingCircle(points: Float64Array): Circle {
  const count = points.length / 2;
  if (count === 0) return { x: 0, y: 0, radius: -1 };
  const order = fixedShuffle(count);
  let circle: Circle = { x: points[2 * order[0]], y: points[2 * order[0] + 1], radius: 0 };
  for (let i = 1; i < count; i++) {
    const px = points[2 * order[i]];
    const py = points[2 * order[i] + 1];
    if (holds(circle, px, py)) continue;
    circle = { x: px, y: py, radius: 0 };
    for (let j = 0; j < i; j++) {
      const qx = points[2 * order[j]];
      const qy = points[2 * order[j] + 1];
      if (holds(circle, qx, qy)) continue;
      circle = throughTwo(px, py, qx, qy);
      for (let k = 0; k < j; k++) {
        const rx = points[2 * order[k]];
        const ry = points[2 * order[k] + 1];
        if (!holds(circle, rx, ry)) circle = throughThree(px, py, qx, qy, rx, ry);
      }
    }
  }
  return circle;
}

function holds(circle: Circle, x: number, y: number): boolean {
  return Math.hypot(x - circle.x, y - circle.y) <= circle.radius * (1 + INSIDE_TOLERANCE);
}

function throughTwo(px: number, py: number, qx: number, qy: number): Circle {
  const x = (px + qx) / 2;
  const y = (py + qy) / 2;
  return { x, y, radius: Math.max(Math.hypot(px - x, py - y), Math.hypot(qx - x, qy - y)) };
}

function throughThree(
  px: number,
  py: number,
  qx: number,
  qy: number,
  rx: number,
  ry: number,
): Circle {
  const ax = qx - px;
  const ay = qy - py;
  const bx = rx - px;
  const by = ry - py;
  const twiceArea = 2 * (ax * by - ay * bx);
  if (twiceArea === 0) return widestPair(px, py, qx, qy, rx, ry);
  const aa = ax * ax + ay * ay;
  const bb = bx * bx + by * by;
  const x = (by * aa - ay * bb) / twiceArea;
  const y = (ax * bb - bx * aa) / twiceArea;
  const radius = Math.max(Math.hypot(x, y), Math.hypot(x - ax, y - ay), Math.hypot(x - bx, y - by));
  return { x: px + x, y: py + y, radius };
}

/** Three points on a line: the circle over the two that lie farthest apart. */
function widestPair(
  px: number,
  py: number,
  qx: number,
  qy: number,
  rx: number,
  ry: number,
): Circle {
  const circles = [
    throughTwo(px, py, qx, qy),
    throughTwo(px, py, rx, ry),
    throughTwo(qx, qy, rx, ry),
  ];
  return circles.reduce((a, b) => (b.radius > a.radius ? b : a));
}

/** Numerical Recipes' linear congruential generator with a fixed start. */
function fixedShuffle(count: number): Uint32Array {
  const order = Uint32Array.from({ length: count }, (_, k) => k);
  let state = 12345;
  for (let k = count - 1; k > 0; k--) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    const other = Math.floor((state / 4294967296) * (k + 1));
    const swap = order[k];
    order[k] = order[other];
    order[other] = swap;
  }
  return order;
}
