/**
 * Triangulates one polygon in space by clipping ears in the plane of its Newell normal (M. Newell,
 * 1972), so it may be concave and a little off its plane. Quadrilaterals are cut along the diagonal
 * that lies inside, the shorter one when both do. A polygon without area, or one that crosses itself
 * so that no ear is left, is cut as a fan: every edge still gets its triangle.
 * @param positions flat xyz; @param corners vertices of the polygon in order, at least three
 * @param push receives the vertices of n - 2 triangles, wound like the polygon
 */
export function triangulatePolygon(
  positions: ArrayLike<number>,
  corners: readonly number[],
  push: (a: number, b: number, c: number) => void,
): void {
  const count = corners.length;
  if (count === 3) return push(corners[0], corners[1], corners[2]);
  const flat = projectFlat(positions, corners);
  if (!flat) return fan(corners, push);
  const { x, y } = flat;
  const left = Array.from({ length: count }, (_, i) => i);
  while (left.length > 3) {
    const ear = bestEar(x, y, left);
    if (ear < 0)
      return fan(
        left.map((i) => corners[i]),
        push,
      );
    const [before, at, after] = around(left, ear);
    push(corners[before], corners[at], corners[after]);
    left.splice(ear, 1);
  }
  push(corners[left[0]], corners[left[1]], corners[left[2]]);
}

function fan(corners: readonly number[], push: (a: number, b: number, c: number) => void): void {
  for (let i = 2; i < corners.length; i++) push(corners[0], corners[i - 1], corners[i]);
}

function around(left: readonly number[], at: number): [number, number, number] {
  const count = left.length;
  return [left[(at + count - 1) % count], left[at], left[(at + 1) % count]];
}

/** Coordinates seen along the largest component of the Newell normal, counter-clockwise. */
function projectFlat(
  positions: ArrayLike<number>,
  corners: readonly number[],
): { x: Float64Array; y: Float64Array } | null {
  const normal = [0, 0, 0];
  for (let i = 0; i < corners.length; i++) {
    const a = 3 * corners[i];
    const b = 3 * corners[(i + 1) % corners.length];
    for (let axis = 0; axis < 3; axis++) {
      const [u, v] = [(axis + 1) % 3, (axis + 2) % 3];
      normal[axis] += (positions[a + u] - positions[b + u]) * (positions[a + v] + positions[b + v]);
    }
  }
  const sizes = normal.map(Math.abs);
  const axis = sizes.indexOf(Math.max(...sizes));
  if (!(sizes[axis] > 0)) return null;
  const [u, v] =
    normal[axis] > 0 ? [(axis + 1) % 3, (axis + 2) % 3] : [(axis + 2) % 3, (axis + 1) % 3];
  return {
    x: Float64Array.from(corners, (corner) => positions[3 * corner + u]),
    y: Float64Array.from(corners, (corner) => positions[3 * corner + v]),
  };
}

/** The ear with the shortest new side; -1 when there is none. */
function bestEar(x: Float64Array, y: Float64Array, left: readonly number[]): number {
  let best = -1;
  let shortest = Infinity;
  for (let i = 0; i < left.length; i++) {
    const [a, b, c] = around(left, i);
    const side = (x[a] - x[c]) ** 2 + (y[a] - y[c]) ** 2;
    if (side >= shortest || turn(x, y, a, b, c) <= 0) continue;
    if (left.some((p) => p !== a && p !== b && p !== c && isInside(x, y, a, b, c, p))) continue;
    best = i;
    shortest = side;
  }
  return best;
}

function turn(x: Float64Array, y: Float64Array, a: number, b: number, c: number): number {
  return (x[b] - x[a]) * (y[c] - y[a]) - (x[c] - x[a]) * (y[b] - y[a]);
}

/** Whether point p lies in the triangle or on its border, other than in one of its corners. */
function isInside(
  x: Float64Array,
  y: Float64Array,
  a: number,
  b: number,
  c: number,
  p: number,
): boolean {
  if (turn(x, y, a, b, p) < 0 || turn(x, y, b, c, p) < 0 || turn(x, y, c, a, p) < 0) return false;
  return ![a, b, c].some((corner) => x[corner] === x[p] && y[corner] === y[p]);
}
