import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { JobContext } from '../../runtime/job-context.js';
import { EdgeTable } from './edge-table.js';
import type { SampleGrid } from './sample-grid.js';

/** Where triangles cross the edges of the grid. The edge from node n along an axis has the key 3·n + axis. */
export interface GridCrossings {
  readonly edges: EdgeTable;
  /** Share of the way along the edge of the first and the last crossing, by the edge's number. */
  readonly first: Float32Array;
  readonly last: Float32Array;
}

/** Lines through a side of a triangle count for both of its triangles: cells. */
const touching = 1e-9;
const reportEvery = 1 << 10;

/** Scan-converts every triangle along the three axes. O(triangles + crossings). */
export function findGridCrossings(
  mesh: TriangleMesh,
  grid: SampleGrid,
  context: JobContext,
): GridCrossings {
  const { positions, indices } = mesh;
  const edges = new EdgeTable();
  let first = new Float32Array(1 << 12);
  let last = new Float32Array(1 << 12);
  const mark = (key: number, share: number): void => {
    const before = edges.count;
    const edge = edges.add(key);
    if (edge < before) {
      if (share < first[edge]) first[edge] = share;
      if (share > last[edge]) last[edge] = share;
      return;
    }
    if (edge === first.length) {
      first = doubled(first);
      last = doubled(last);
    }
    first[edge] = share;
    last[edge] = share;
  };
  const corners = new Float64Array(9);
  for (let i = 0; i < indices.length; i += 3) {
    if (((i / 3) & (reportEvery - 1)) === 0)
      context.progress('Laying the grid', i / indices.length);
    for (let k = 0; k < 9; k++) {
      const value = positions[3 * indices[i + ((k / 3) | 0)] + (k % 3)];
      corners[k] = (value - grid.origin[k % 3]) / grid.spacing;
    }
    for (let axis = 0; axis < 3; axis++) scan(corners, axis, grid, mark);
  }
  return { edges, first, last };
}

function doubled(values: Float32Array): Float32Array<ArrayBuffer> {
  const larger = new Float32Array(2 * values.length);
  larger.set(values);
  return larger;
}

/** Marks the crossings of one triangle, in cells, with the grid's lines along an axis. */
function scan(
  p: Float64Array,
  axis: number,
  grid: SampleGrid,
  mark: (key: number, share: number) => void,
): void {
  const u = axis === 2 ? 0 : axis + 1;
  const v = axis === 0 ? 2 : axis - 1;
  const [ux, uy] = [p[3 + u] - p[u], p[3 + v] - p[v]];
  const [vx, vy] = [p[6 + u] - p[u], p[6 + v] - p[v]];
  const twofold = ux * vy - uy * vx;
  // Seen edge-on: no line along this axis passes through.
  if (!(Math.abs(twofold) > 1e-12)) return;
  const [ua, va] = [p[3 + axis] - p[axis], p[6 + axis] - p[axis]];
  const slopeU = (ua * vy - va * uy) / twofold;
  const slopeV = (va * ux - ua * vx) / twofold;
  const lowest = Math.min(p[axis], p[3 + axis], p[6 + axis]);
  const highest = Math.max(p[axis], p[3 + axis], p[6 + axis]);
  const top = Math.floor(Math.max(p[v], p[3 + v], p[6 + v]) + touching);
  for (let row = Math.ceil(Math.min(p[v], p[3 + v], p[6 + v]) - touching); row <= top; row++) {
    let from = Infinity;
    let to = -Infinity;
    for (let i = 0; i < 9; i += 3) {
      const j = i === 6 ? 0 : i + 3;
      const low = Math.min(p[i + v], p[j + v]);
      const high = Math.max(p[i + v], p[j + v]);
      if (row < low - touching || row > high + touching) continue;
      if (high - low <= touching) {
        from = Math.min(from, p[i + u], p[j + u]);
        to = Math.max(to, p[i + u], p[j + u]);
        continue;
      }
      const share = Math.min(1, Math.max(0, (row - p[i + v]) / (p[j + v] - p[i + v])));
      const at = p[i + u] + share * (p[j + u] - p[i + u]);
      if (at < from) from = at;
      if (at > to) to = at;
    }
    const end = Math.floor(to + touching);
    for (let column = Math.ceil(from - touching); column <= end; column++) {
      const plane = p[axis] + slopeU * (column - p[u]) + slopeV * (row - p[v]);
      const height = Math.min(highest, Math.max(lowest, plane));
      const cell = Math.floor(height);
      const node = cell * grid.step[axis] + column * grid.step[u] + row * grid.step[v];
      mark(3 * node + axis, height - cell);
    }
  }
}
