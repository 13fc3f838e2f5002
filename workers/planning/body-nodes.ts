import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type FitFrames } from './fit-frames.js';

/** More vertices than this are thinned out evenly. */
const MOST_VERTICES = 2_500;
/** And no more points than this are put on long edges. */
const MOST_ON_EDGES = 4_000;

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
 */
export function bodyNodes(mesh: TriangleMesh, fit: FitFrames, spacingMm: number): BodyNodes {
  const points = [...thinnedVertices(mesh.positions), ...pointsOnEdges(mesh, spacingMm)];
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
  return { points: Float64Array.from(points), count, onAxes };
}

export function thinnedVertices(positions: Float64Array): Float64Array {
  const vertices = positions.length / 3;
  if (vertices <= MOST_VERTICES) return positions;
  const stride = vertices / MOST_VERTICES;
  const kept = new Float64Array(3 * MOST_VERTICES);
  for (let k = 0; k < MOST_VERTICES; k++) {
    const from = 3 * Math.floor(k * stride);
    kept[3 * k] = positions[from];
    kept[3 * k + 1] = positions[from + 1];
    kept[3 * k + 2] = positions[from + 2];
  }
  return kept;
}

export function pointsOnEdges(
  { positions: p, indices }: TriangleMesh,
  spacingMm: number,
): number[] {
  const points: number[] = [];
  for (let t = 0; t < indices.length && points.length < 3 * MOST_ON_EDGES; t += 3) {
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
      for (let k = 1; k < pieces; k++) {
        const part = k / pieces;
        points.push(p[a] + part * x, p[a + 1] + part * y, p[a + 2] + part * z);
      }
    }
  }
  return points;
}
