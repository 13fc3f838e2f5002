/** From this many vertices on, one per small cube of space stands for its neighbours. */
const MOST_VERTICES = 700;

/**
 * At most about MOST_VERTICES of the vertices: of those in one small cube the one farthest from
 * the body's middle, for extents are decided on the outside. All of them when they are few.
 */
export function outerVertices(positions: Float64Array): Float64Array {
  const count = positions.length / 3;
  if (count <= MOST_VERTICES) return positions;
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (let k = 0; k < positions.length; k += 3) {
    for (let axis = 0; axis < 3; axis++) {
      const at = positions[k + axis];
      if (at < low[axis]) low[axis] = at;
      if (at > high[axis]) high[axis] = at;
    }
  }
  const size = low.map((from, axis) => high[axis] - from);
  // A surface passes about 2·(ab + bc + ca)/s² cubes of side s; start there and adjust once.
  const faces = 2 * (size[0] * size[1] + size[1] * size[2] + size[2] * size[0]);
  let side = Math.sqrt(Math.max(faces, 1e-12) / MOST_VERTICES);
  let kept = farthestPerCube(positions, low, size, side);
  if (kept.length > 1.3 * MOST_VERTICES || kept.length < 0.6 * MOST_VERTICES) {
    side *= Math.sqrt(kept.length / MOST_VERTICES);
    kept = farthestPerCube(positions, low, size, side);
  }
  const points = new Float64Array(3 * kept.length);
  for (let k = 0; k < kept.length; k++) {
    const from = 3 * kept[k];
    points[3 * k] = positions[from];
    points[3 * k + 1] = positions[from + 1];
    points[3 * k + 2] = positions[from + 2];
  }
  return points;
}

function farthestPerCube(
  positions: Float64Array,
  low: readonly number[],
  size: readonly number[],
  side: number,
): number[] {
  const [x0, y0, z0] = low;
  const rows = Math.floor(size[0] / side) + 1;
  const columns = Math.floor(size[1] / side) + 1;
  const mx = x0 + size[0] / 2;
  const my = y0 + size[1] / 2;
  const mz = z0 + size[2] / 2;
  const best = new Map<number, number>();
  const far = new Float64Array(positions.length / 3);
  for (let k = 0, i = 0; i < positions.length; k++, i += 3) {
    const x = positions[i];
    const y = positions[i + 1];
    const z = positions[i + 2];
    far[k] = (x - mx) ** 2 + (y - my) ** 2 + (z - mz) ** 2;
    const cube =
      (Math.floor((z - z0) / side) * columns + Math.floor((y - y0) / side)) * rows +
      Math.floor((x - x0) / side);
    const known = best.get(cube);
    if (known === undefined || far[k] > far[known]) best.set(cube, k);
  }
  return [...best.values()];
}
