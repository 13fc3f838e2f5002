import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';

/**
 * Whether two triangles of a mesh run into each other: an edge of one passes through the other or its
 * border, or both lie in one plane and share area. Touching is no crossing, neither of neighbours in
 * their common corners nor of strangers that stay on one side. What reaches no farther than the
 * tolerance through a plane or over a line touches it: sound neighbours are never reported, whatever
 * the rounding of their coordinates. After T. Möller, "A Fast Triangle-Triangle Intersection Test",
 * J. Graphics Tools 2(2), 1997, with signs of volumes in place of intervals.
 * @param p flat xyz; @param a0 … b2 vertex numbers of the two triangles
 * @param planes four numbers a plane, as `writePlane` writes them; @param pa, pb those of the triangles
 * @param tolerance a length in the unit of `p`
 */
export function trianglesCross(
  p: Float64Array,
  planes: Float64Array,
  a0: number,
  a1: number,
  a2: number,
  pa: number,
  b0: number,
  b1: number,
  b2: number,
  pb: number,
  tolerance: number,
): boolean {
  const sa0 = a0 === b0 || a0 === b1 || a0 === b2 ? 0 : sideOf(p, planes, pb, a0, tolerance);
  const sa1 = a1 === b0 || a1 === b1 || a1 === b2 ? 0 : sideOf(p, planes, pb, a1, tolerance);
  const sa2 = a2 === b0 || a2 === b1 || a2 === b2 ? 0 : sideOf(p, planes, pb, a2, tolerance);
  if (sa0 === 0 && sa1 === 0 && sa2 === 0)
    return overlapInPlane(p, planes, a0, a1, a2, b0, b1, b2, pb, tolerance);
  // All on one side or touching: nothing passes through.
  if (sa0 >= 0 && sa1 >= 0 && sa2 >= 0) return false;
  if (sa0 <= 0 && sa1 <= 0 && sa2 <= 0) return false;
  const sb0 = b0 === a0 || b0 === a1 || b0 === a2 ? 0 : sideOf(p, planes, pa, b0, tolerance);
  const sb1 = b1 === a0 || b1 === a1 || b1 === a2 ? 0 : sideOf(p, planes, pa, b1, tolerance);
  const sb2 = b2 === a0 || b2 === a1 || b2 === a2 ? 0 : sideOf(p, planes, pa, b2, tolerance);
  if (sb0 >= 0 && sb1 >= 0 && sb2 >= 0) return false;
  if (sb0 <= 0 && sb1 <= 0 && sb2 <= 0) return false;
  return (
    (sa0 * sa1 < 0 && passesThrough(p, a0, a1, b0, b1, b2)) ||
    (sa1 * sa2 < 0 && passesThrough(p, a1, a2, b0, b1, b2)) ||
    (sa2 * sa0 < 0 && passesThrough(p, a2, a0, b0, b1, b2)) ||
    (sb0 * sb1 < 0 && passesThrough(p, b0, b1, a0, a1, a2)) ||
    (sb1 * sb2 < 0 && passesThrough(p, b1, b2, a0, a1, a2)) ||
    (sb2 * sb0 < 0 && passesThrough(p, b2, b0, a0, a1, a2))
  );
}

/**
 * Writes unit normal and offset of a triangle's plane; zeros for a triangle without area.
 * @param corners vertices; @param at where the triangle's three stand; @param to where its four go
 */
export function writePlane(
  p: Float64Array,
  corners: Uint32Array,
  at: number,
  planes: Float64Array,
  to: number,
): void {
  facetNormal(p, corners, at, planes, to);
  const point = 3 * corners[at];
  planes[to + 3] =
    planes[to] * p[point] + planes[to + 1] * p[point + 1] + planes[to + 2] * p[point + 2];
}

function sideOf(
  p: Float64Array,
  planes: Float64Array,
  plane: number,
  at: number,
  tolerance: number,
): number {
  const distance =
    planes[plane] * p[3 * at] +
    planes[plane + 1] * p[3 * at + 1] +
    planes[plane + 2] * p[3 * at + 2] -
    planes[plane + 3];
  return distance > tolerance ? 1 : distance < -tolerance ? -1 : 0;
}

/**
 * Whether a segment that has its ends on both sides of a triangle's plane goes through the triangle. Its
 * border counts: boxes that stand in line pierce each other just on the diagonals of their sides.
 */
function passesThrough(
  p: Float64Array,
  from: number,
  to: number,
  a: number,
  b: number,
  c: number,
): boolean {
  const ab = turnRound(p, from, to, a, b);
  const bc = turnRound(p, from, to, b, c);
  const ca = turnRound(p, from, to, c, a);
  const isLeft = ab >= 0 && bc >= 0 && ca >= 0;
  const isRight = ab <= 0 && bc <= 0 && ca <= 0;
  return isLeft !== isRight;
}

/** Bound of the rounding of a 3×3 determinant of differences, relative to its terms' sizes
 *  (J. R. Shewchuk, "Adaptive Precision Floating-Point Arithmetic", 1997: (7 + 56ε)ε), doubled. */
const rounding = 2 * 7.8e-16;

/** On which side the line from → to passes the edge a → b; 0 when rounding could turn it. */
function turnRound(p: Float64Array, a: number, b: number, c: number, d: number): number {
  if (d === a || d === b || c === a || c === b) return 0;
  const dx = p[3 * d];
  const dy = p[3 * d + 1];
  const dz = p[3 * d + 2];
  const ax = p[3 * a] - dx;
  const ay = p[3 * a + 1] - dy;
  const az = p[3 * a + 2] - dz;
  const bx = p[3 * b] - dx;
  const by = p[3 * b + 1] - dy;
  const bz = p[3 * b + 2] - dz;
  const cx = p[3 * c] - dx;
  const cy = p[3 * c + 1] - dy;
  const cz = p[3 * c + 2] - dz;
  const m1 = bx * cy;
  const m2 = cx * by;
  const m3 = cx * ay;
  const m4 = ax * cy;
  const m5 = ax * by;
  const m6 = bx * ay;
  const volume = az * (m1 - m2) + bz * (m3 - m4) + cz * (m5 - m6);
  const size =
    (Math.abs(m1) + Math.abs(m2)) * Math.abs(az) +
    (Math.abs(m3) + Math.abs(m4)) * Math.abs(bz) +
    (Math.abs(m5) + Math.abs(m6)) * Math.abs(cz);
  if (volume > rounding * size) return 1;
  return volume < -rounding * size ? -1 : 0;
}

const flat = new Float64Array(12);

/** Whether two triangles of one plane share area, by the separating lines along their sides. */
function overlapInPlane(
  p: Float64Array,
  planes: Float64Array,
  a0: number,
  a1: number,
  a2: number,
  b0: number,
  b1: number,
  b2: number,
  plane: number,
  tolerance: number,
): boolean {
  const drop = largestNormalAxis(planes, plane);
  const u = (drop + 1) % 3;
  const v = (drop + 2) % 3;
  const corners = [a0, a1, a2, b0, b1, b2];
  for (let i = 0; i < 6; i++) {
    flat[2 * i] = p[3 * corners[i] + u];
    flat[2 * i + 1] = p[3 * corners[i] + v];
  }
  return !isSeparated(0, 6, tolerance) && !isSeparated(6, 0, tolerance);
}

/** Whether a side of the triangle at `one` of `flat` has the other triangle wholly beyond it, or the
 *  triangle has no width. */
function isSeparated(one: number, other: number, tolerance: number): boolean {
  const winding = Math.sign(offLine(one, one + 2, one + 4, 0));
  for (let i = 0; i < 6; i += 2) {
    const a = one + i;
    const b = one + ((i + 2) % 6);
    if (offLine(a, b, one + ((i + 4) % 6), tolerance) === 0) return true;
    let beyond = 0;
    for (let k = 0; k < 6; k += 2) if (offLine(a, b, other + k, tolerance) * winding <= 0) beyond++;
    if (beyond === 3) return true;
  }
  return false;
}

/** Signed distance of c from the line a → b; 0 within the tolerance. */
function offLine(a: number, b: number, c: number, tolerance: number): number {
  const x = flat[b] - flat[a];
  const y = flat[b + 1] - flat[a + 1];
  const length = Math.sqrt(x * x + y * y);
  if (length === 0) return 0;
  const off = (x * (flat[c + 1] - flat[a + 1]) - y * (flat[c] - flat[a])) / length;
  return Math.abs(off) > tolerance ? off : 0;
}

function largestNormalAxis(planes: Float64Array, plane: number): number {
  const x = Math.abs(planes[plane]);
  const y = Math.abs(planes[plane + 1]);
  const z = Math.abs(planes[plane + 2]);
  if (x >= y && x >= z) return 0;
  return y >= z ? 1 : 2;
}
