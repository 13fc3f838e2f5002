/**
 * Winding number of a closed surface around a point: 1 inside an outward-oriented solid, 0 outside,
 * more or less where shells overlap. Counts crossings of the ray along +x. Which side of the ray a
 * projected edge passes is computed from its lower-numbered end, so the two triangles at an edge
 * always agree and no crossing is lost or counted twice, whatever the rounding. A point on the
 * surface counts as either side.
 * @param positions flat xyz; @param indices vertex triples
 * @param triangles which triangles to read; from, to: the part of that list
 * Source: half-open crossing rule for polygons (common practice), taken to triangles.
 * O(triangles read), allocates nothing.
 */
export function windingNumber(
  positions: Float64Array,
  indices: Uint32Array,
  triangles: Uint32Array,
  from: number,
  to: number,
  x: number,
  y: number,
  z: number,
): number {
  let winding = 0;
  for (let i = from; i < to; i++) {
    const first = 3 * triangles[i];
    const a = indices[first];
    const b = indices[first + 1];
    const c = indices[first + 2];
    const za = positions[3 * a + 2] > z;
    const zb = positions[3 * b + 2] > z;
    const zc = positions[3 * c + 2] > z;
    if (za === zb && zb === zc) continue;
    // The projected triangle holds the point when its border turns once around it.
    let turn = 0;
    if (za !== zb) turn += crossesLeft(positions, a, b, y, z) ? (zb ? 1 : -1) : 0;
    if (zb !== zc) turn += crossesLeft(positions, b, c, y, z) ? (zc ? 1 : -1) : 0;
    if (zc !== za) turn += crossesLeft(positions, c, a, y, z) ? (za ? 1 : -1) : 0;
    if (turn !== 0 && liesAhead(positions, a, b, c, x, y, z)) winding += turn;
  }
  return winding;
}

/** Whether the edge, which crosses height z, passes the point at a larger y. */
function crossesLeft(positions: Float64Array, a: number, b: number, y: number, z: number): boolean {
  const low = 3 * (a < b ? a : b);
  const high = 3 * (a < b ? b : a);
  const y0 = positions[low + 1];
  const z0 = positions[low + 2];
  const t = (z - z0) / (positions[high + 2] - z0);
  return y0 + t * (positions[high + 1] - y0) > y;
}

/** Whether the triangle's plane is met at a larger x. */
function liesAhead(
  positions: Float64Array,
  a: number,
  b: number,
  c: number,
  x: number,
  y: number,
  z: number,
): boolean {
  const ax = positions[3 * a] - x;
  const ay = positions[3 * a + 1] - y;
  const az = positions[3 * a + 2] - z;
  const bx = positions[3 * b] - x;
  const by = positions[3 * b + 1] - y;
  const bz = positions[3 * b + 2] - z;
  const cx = positions[3 * c] - x;
  const cy = positions[3 * c + 1] - y;
  const cz = positions[3 * c + 2] - z;
  const wa = by * cz - bz * cy;
  const wb = cy * az - cz * ay;
  const wc = ay * bz - az * by;
  const area = wa + wb + wc;
  const ahead = wa * ax + wb * bx + wc * cx;
  return area > 0 ? ahead > 0 : ahead < 0;
}
