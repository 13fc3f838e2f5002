/**
 * Writes the unit normal of a triangle and returns its area, square of the positions' unit. A triangle
 * without area gets the normal (0, 0, 0).
 * @param p flat xyz; @param indices vertices; @param at where the triangle's three stand in `indices`
 * @param target receives xyz at `to`; nothing is allocated
 */
export function facetNormal(
  p: Float64Array,
  indices: Uint32Array,
  at: number,
  target: Float64Array,
  to: number,
): number {
  const a = 3 * indices[at];
  const b = 3 * indices[at + 1];
  const c = 3 * indices[at + 2];
  const ux = p[b] - p[a];
  const uy = p[b + 1] - p[a + 1];
  const uz = p[b + 2] - p[a + 2];
  const vx = p[c] - p[a];
  const vy = p[c + 1] - p[a + 1];
  const vz = p[c + 2] - p[a + 2];
  const x = uy * vz - uz * vy;
  const y = uz * vx - ux * vz;
  const z = ux * vy - uy * vx;
  const length = Math.sqrt(x * x + y * y + z * z);
  const factor = length > 0 ? 1 / length : 0;
  target[to] = x * factor;
  target[to + 1] = y * factor;
  target[to + 2] = z * factor;
  return length / 2;
}

const scratch = new Float64Array(3);

/** Area of one triangle, square of the positions' unit. */
export function facetArea(p: Float64Array, indices: Uint32Array, at: number): number {
  return facetNormal(p, indices, at, scratch, 0);
}
