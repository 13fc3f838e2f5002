import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type FitFrames } from './fit-frames.js';

/** No more points than this are put on long edges. */
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
      if (tags[t] <= 0) continue;
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
