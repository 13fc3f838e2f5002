import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type FitFrames } from './fit-frames.js';

/** From this many vertices on, one per small cube of space stands for its neighbours. */
const MOST_VERTICES = 700;
/** And no more points than this are put on long edges. */
const MOST_ON_EDGES = 1_500;

/** Points that stand for a body while it is swept: vertices and points along its long edges. */
export interface BodyNodes {
  /** Flat xyz, mm, length 3 × count. */
  readonly points: Float64Array;
  readonly count: number;
  /** Projections on the axes of the fit frames, node after node: length count × axisCount. */
  readonly onAxes: Float32Array;
}

/**
 * A side's extents are decided by its vertices and by where its edges cross the cut; points along
 * the edges, at most `spacingMm` apart, stand for the crossings of every possible cut.
 * @param vertices the body's vertices as `outerVertices` thins them, flat xyz
 */
export function bodyNodes(
  mesh: TriangleMesh,
  vertices: Float64Array,
  fit: FitFrames,
  spacingMm: number,
): BodyNodes {
  const onEdges = pointsOnEdges(mesh, spacingMm, MOST_ON_EDGES);
  const points = new Float64Array(vertices.length + onEdges.length);
  points.set(vertices);
  points.set(onEdges, vertices.length);
  const count = points.length / 3;
  const { axes, axisCount } = fit;
  const onAxes = new Float32Array(count * axisCount);
  for (let k = 0, at = 0; k < points.length; k += 3) {
    const x = points[k];
    const y = points[k + 1];
    const z = points[k + 2];
    for (let a = 0; a < 3 * axisCount; a += 3)
      onAxes[at++] = axes[a] * x + axes[a + 1] * y + axes[a + 2] * z;
  }
  return { points, count, onAxes };
}

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

/**
 * Points along edges longer than the spacing, flat xyz, mm; edges inside one cap are left out.
 * @param most no more points than about this
 */
export function pointsOnEdges(
  { positions: p, indices, tags }: TriangleMesh,
  spacingMm: number,
  most: number,
): number[] {
  const isLong = longEdges(p, indices, spacingMm);
  if (!isLong) return [];
  const vertices = p.length / 3;
  const capEdges = new Map<number, number>();
  if (tags) {
    for (let t = 0; t < tags.length; t++) {
      if (tags[t] === 0) continue;
      for (let corner = 0; corner < 3; corner++) {
        const from = indices[3 * t + corner];
        const to = indices[3 * t + ((corner + 1) % 3)];
        if (from > to) capEdges.set(to * vertices + from, tags[t]);
      }
    }
  }
  const points: number[] = [];
  for (let t = 0; t < indices.length && points.length < 3 * most; t += 3) {
    const tag = tags ? tags[t / 3] : 0;
    for (let corner = 0; corner < 3; corner++) {
      const from = indices[t + corner];
      const to = indices[corner === 2 ? t : t + corner + 1];
      // Each edge of a closed surface runs both ways; once is enough.
      if (from >= to) continue;
      const a = 3 * from;
      const b = 3 * to;
      const x = p[b] - p[a];
      const y = p[b + 1] - p[a + 1];
      const z = p[b + 2] - p[a + 2];
      const pieces = Math.ceil(Math.sqrt(x * x + y * y + z * z) / spacingMm);
      if (pieces < 2 || (tag > 0 && capEdges.get(from * vertices + to) === tag)) continue;
      for (let k = 1; k < pieces; k++) {
        const part = k / pieces;
        points.push(p[a] + part * x, p[a + 1] + part * y, p[a + 2] + part * z);
      }
    }
  }
  return points;
}

function longEdges(p: Float64Array, indices: Uint32Array, spacingMm: number): boolean {
  const limit = spacingMm * spacingMm;
  for (let t = 0; t < indices.length; t += 3) {
    for (let corner = 0; corner < 3; corner++) {
      const a = 3 * indices[t + corner];
      const b = 3 * indices[corner === 2 ? t : t + corner + 1];
      const x = p[b] - p[a];
      const y = p[b + 1] - p[a + 1];
      const z = p[b + 2] - p[a + 2];
      if (x * x + y * y + z * z > limit) return true;
    }
  }
  return false;
}
