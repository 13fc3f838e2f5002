import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { JobContext } from '../../runtime/job-context.js';
import { makeCellPatches } from './cell-patches.js';
import { EdgeTable } from './edge-table.js';
import type { GridCrossings } from './grid-crossings.js';
import type { SurfaceCells } from './grid-sides.js';
import type { NodeSides } from './node-sides.js';
import type { SampleGrid } from './sample-grid.js';

export interface PatchedCells {
  readonly mesh: TriangleMesh;
  /** 1 for vertices with no triangle of the original on their edge of the grid: where a hole was closed. */
  readonly isAcross: Uint8Array;
}

/** Cuts keep this share of a cell off the nodes, so that no two vertices meet there. Own choice. */
const shyness = 0.01;
/** Crossings closer than this share of a cell are one: those of doubled facets and shared sides. */
const sameCrossing = 1e-3;
const halvings = 8;
const reportEvery = 1 << 11;

/**
 * The surface through the given cells: one vertex on each edge of the grid whose ends differ in side.
 * It lies where the one triangle crosses the edge; across holes, and where several triangles cross, it
 * is found by halving. Closed and manifold.
 */
export function patchCells(
  grid: SampleGrid,
  cells: SurfaceCells,
  crossings: GridCrossings,
  sides: Pick<NodeSides, 'isInsideOn' | 'isInsideAt'>,
  context: JobContext,
): PatchedCells {
  const { triangles, edgeStart } = makeCellPatches();
  const { step } = grid;
  const offset = Float64Array.from(edgeStart, (corner, edge) => {
    const node = (corner & 1) * step[0] + ((corner >> 1) & 1) * step[1] + (corner >> 2) * step[2];
    return 3 * node + (edge >> 2);
  });
  const vertices = new EdgeTable(cells.count);
  let corners = 0;
  for (let cell = 0; cell < cells.count; cell++) corners += triangles[cells.inside[cell]].length;
  const indices = new Uint32Array(corners);
  let filled = 0;
  for (let cell = 0; cell < cells.count; cell++) {
    if ((cell & (reportEvery - 1)) === 0)
      context.progress('Drawing the surface', (0.4 * cell) / cells.count);
    const patch = triangles[cells.inside[cell]];
    const key = 3 * cells.node[cell];
    for (let k = 0; k < patch.length; k++) indices[filled++] = vertices.add(key + offset[patch[k]]);
  }
  const positions = new Float64Array(3 * vertices.count);
  const isAcross = new Uint8Array(vertices.count);
  const place = placer(grid, crossings, sides);
  for (let vertex = 0; vertex < vertices.count; vertex++) {
    if ((vertex & (reportEvery - 1)) === 0)
      context.progress('Drawing the surface', 0.4 + (0.6 * vertex) / vertices.count);
    if (place(vertices.keys[vertex], positions, 3 * vertex)) isAcross[vertex] = 1;
  }
  return { mesh: { positions, indices }, isAcross };
}

/** Writes the point where an edge of the grid is cut; tells whether no triangle is there. */
function placer(
  { origin, spacing, step }: SampleGrid,
  { edges, first, last }: GridCrossings,
  { isInsideOn, isInsideAt }: Pick<NodeSides, 'isInsideOn' | 'isInsideAt'>,
) {
  const point = new Float64Array(3);
  return (key: number, target: Float64Array, at: number): boolean => {
    const node = Math.floor(key / 3);
    const axis = key - 3 * node;
    const z = Math.floor(node / step[2]);
    const y = Math.floor((node - z * step[2]) / step[1]);
    point[0] = node - z * step[2] - y * step[1];
    point[1] = y;
    point[2] = z;
    const edge = edges.find(key);
    let share = 0;
    if (edge >= 0 && last[edge] - first[edge] < sameCrossing) share = first[edge];
    else {
      const start = point[axis];
      const sideAt = (along: number): boolean => {
        if (edge < 0) return isInsideOn(node, axis, along);
        point[axis] = start + along;
        return isInsideAt(
          origin[0] + point[0] * spacing,
          origin[1] + point[1] * spacing,
          origin[2] + point[2] * spacing,
        );
      };
      const side = sideAt(0);
      for (let size = 0.5, k = 0; k < halvings; k++, size /= 2)
        if (sideAt(share + size) === side) share += size;
      point[axis] = start;
    }
    point[axis] += Math.min(1 - shyness, Math.max(shyness, share));
    for (let k = 0; k < 3; k++) target[at + k] = origin[k] + point[k] * spacing;
    return edge < 0;
  };
}
