/** Gains in room below this do not justify turning a part out of the axes, mm. */
const TIE_MM = 1e-9;
/** Crossings this little outside their interval still count, rad: rounding of angles. */
const ANGLE_TOLERANCE = 1e-12;

export interface RectangleFit {
  /** Smallest room left along either side, mm; negative when no rotation fits. */
  readonly slackMm: number;
  /** The rotation x' = cos·x − sin·y, y' = sin·x + cos·y that leaves it. */
  readonly cos: number;
  readonly sin: number;
}

/**
 * The rotation of a convex polygon that leaves the most room in a rectangle, exactly.
 *
 * The width of a convex polygon along a turning direction is a chain of sinusoid arcs that change
 * where the direction is normal to an edge (rotating calipers). Within an arc both rooms
 * a − width and b − height are convex, so their minimum is largest at an end of the arc or where
 * the two are equal, which is one trigonometric equation. All candidates are looked at, over a
 * quarter turn and both ways round.
 * @param hull flat xy, mm, convex, counter-clockwise, as `convexHull2d` returns; one or two points
 *   are allowed; none fits with all the room
 * @param a the rectangle's side along x, mm
 * @param b the rectangle's side along y, mm
 * @returns the axis-aligned rotation whenever no other leaves more room. Cost O(corners).
 */
export function fitInRectangle(hull: Float64Array, a: number, b: number): RectangleFit {
  const count = hull.length / 2;
  if (count === 0) return { slackMm: Math.min(a, b), cos: 1, sin: 0 };
  const upright = room(hull, a, b, 1, 0);
  const swapped = room(hull, a, b, 0, 1);
  let best: RectangleFit =
    swapped > upright + TIE_MM
      ? { slackMm: swapped, cos: 0, sin: -1 }
      : { slackMm: upright, cos: 1, sin: 0 };
  if (count === 1) return best;
  const aligned = best.slackMm;
  for (const angle of candidateAngles(hull, a, b)) {
    const ux = Math.cos(angle);
    const uy = Math.sin(angle);
    const straight = room(hull, a, b, ux, uy);
    const turned = room(hull, a, b, -uy, ux);
    if (Math.max(straight, turned) <= Math.max(best.slackMm, aligned + TIE_MM)) continue;
    best =
      straight >= turned
        ? { slackMm: straight, cos: ux, sin: -uy }
        : { slackMm: turned, cos: -uy, sin: -ux };
  }
  return best;
}

/** Room left when direction (ux, uy) of the polygon is laid along x, mm. */
function room(hull: Float64Array, a: number, b: number, ux: number, uy: number): number {
  let minX = Infinity;
  let maxX = -Infinity;
  let minY = Infinity;
  let maxY = -Infinity;
  for (let k = 0; k < hull.length; k += 2) {
    const x = ux * hull[k] + uy * hull[k + 1];
    const y = ux * hull[k + 1] - uy * hull[k];
    if (x < minX) minX = x;
    if (x > maxX) maxX = x;
    if (y < minY) minY = y;
    if (y > maxY) maxY = y;
  }
  return Math.min(a - (maxX - minX), b - (maxY - minY));
}

const QUARTER = Math.PI / 2;

/** The angles in a quarter turn at which the most room can occur, rad; at most five per arc. */
function candidateAngles(hull: Float64Array, a: number, b: number): number[] {
  const count = hull.length / 2;
  const angles: number[] = [];
  const caliper = [0, 1, 2, 3].map((side) => supportCorner(hull, side));
  let angle = 0;
  // Four pointers pass each edge at most once in a quarter turn.
  for (let guard = 0; guard <= 4 * count && angle < QUARTER; guard++) {
    let step = QUARTER - angle;
    let moving = -1;
    for (let side = 0; side < 4; side++) {
      const turn = angleToEdge(hull, caliper[side], angle + side * QUARTER);
      if (turn < step) {
        step = turn;
        moving = side;
      }
    }
    const end = angle + step;
    addCrossings(angles, hull, caliper, angle, end, a - b);
    if (a !== b) addCrossings(angles, hull, caliper, angle, end, b - a);
    if (end < QUARTER) angles.push(end);
    angle = end;
    if (moving < 0) break;
    caliper[moving] = (caliper[moving] + 1) % count;
  }
  return angles;
}

/** The corner farthest along direction `side` × 90°; of equals the last in turning order. */
function supportCorner(hull: Float64Array, side: number): number {
  const ux = side === 0 ? 1 : side === 2 ? -1 : 0;
  const uy = side === 1 ? 1 : side === 3 ? -1 : 0;
  const count = hull.length / 2;
  let best = 0;
  let most = -Infinity;
  for (let k = 0; k < count; k++) {
    const reach = ux * hull[2 * k] + uy * hull[2 * k + 1];
    if (reach > most) {
      most = reach;
      best = k;
    }
  }
  const next = (best + 1) % count;
  return ux * hull[2 * next] + uy * hull[2 * next + 1] === most ? next : best;
}

/** How far a direction at `angle` still turns before it is normal to the edge after `corner`. */
function angleToEdge(hull: Float64Array, corner: number, angle: number): number {
  const count = hull.length / 2;
  const next = (corner + 1) % count;
  const nx = hull[2 * next + 1] - hull[2 * corner + 1];
  const ny = hull[2 * corner] - hull[2 * next];
  const ux = Math.cos(angle);
  const uy = Math.sin(angle);
  return Math.max(0, Math.atan2(ux * ny - uy * nx, ux * nx + uy * ny));
}

/** Adds the angles within an arc at which width − height equals `difference`. */
function addCrossings(
  angles: number[],
  hull: Float64Array,
  caliper: readonly number[],
  from: number,
  to: number,
  difference: number,
): void {
  const [right, top, left, bottom] = caliper;
  const wx = hull[2 * right] - hull[2 * left];
  const wy = hull[2 * right + 1] - hull[2 * left + 1];
  const hx = hull[2 * top] - hull[2 * bottom];
  const hy = hull[2 * top + 1] - hull[2 * bottom + 1];
  // width − height = p cos + q sin, with height measured along (−sin, cos).
  const p = wx - hy;
  const q = wy + hx;
  const reach = Math.hypot(p, q);
  if (reach === 0 || Math.abs(difference) > reach) return;
  const middle = Math.atan2(q, p);
  const spread = Math.acos(difference / reach);
  for (let turn = -1; turn <= 1; turn++) {
    for (let sign = -1; sign <= 1; sign += 2) {
      const at = middle + sign * spread + turn * 2 * Math.PI;
      if (at > from - ANGLE_TOLERANCE && at < to + ANGLE_TOLERANCE)
        angles.push(Math.min(to, Math.max(from, at)));
    }
  }
}
