import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, portionOf } from '../../runtime/job-context.js';
import { closingCones } from './closing-cones.js';
import type { EdgeTable } from './edge-table.js';
import { findGridCrossings, type GridCrossings } from './grid-crossings.js';
import type { SampleGrid } from './sample-grid.js';
import { buildWindingTree, type WindingTree } from './winding-tree.js';

/** Tells whether nodes of the grid lie inside. */
export interface NodeSides {
  readonly isInside: (node: number) => boolean;
  /** The same of a point on the edge from a node along an axis, where no triangle of the mesh crosses it. */
  readonly isInsideOn: (node: number, axis: number, share: number) => boolean;
  /** The same of any point, worked out each time. */
  readonly isInsideAt: (x: number, y: number, z: number) => boolean;
}

/** Numbers are kept with this added, so that 0 says that there is none yet. */
const shift = 101;
const mostTurns = 100;
/** A point is inside where the surface winds around it more than this often. */
const insideFrom = 0.5;
/** The cones decide alone where the surface runs across holes: it should be smooth there. */
const coneFarRadii = 4;
/** Crossings closer than this share of a cell are one. */
const sameCrossing = 1e-3;
const nowhere: WindingTree = { windingAt: () => 0 };

/**
 * Inside is where the generalised winding number exceeds one half. Closed by cones over its rims the
 * surface winds a whole number of times around each node, and as often around the next one unless a
 * triangle passes between them: so a node takes the number of a neighbour where it can, and only the
 * share of the cones, of which there are few, is worked out for it. Two bytes a node that is asked.
 * @param facing -1 for a surface that faces inward
 */
export function tellNodeSides(
  mesh: TriangleMesh,
  grid: SampleGrid,
  crossings: GridCrossings,
  { middle, facing, context }: { middle: readonly number[]; facing: 1 | -1; context: JobContext },
): NodeSides {
  const { windingAt } = buildWindingTree(mesh, middle, { context: portionOf(context, 0, 0.6) });
  const cones = closingCones(mesh);
  const hasCones = cones !== null && cones.indices.length > 0;
  const cone = hasCones
    ? buildWindingTree(cones, middle, {
        context: portionOf(context, 0.6, 0.8),
        farRadii: coneFarRadii,
      })
    : nowhere;
  const coneCrossings = hasCones
    ? findGridCrossings(cones, grid, portionOf(context, 0.8, 1))
    : null;
  const walls = [crossings.edges];
  if (coneCrossings) walls.push(coneCrossings.edges);
  const isInsideAt = (x: number, y: number, z: number) => facing * windingAt(x, y, z) > insideFrom;
  const { origin, spacing, step, nodes } = grid;
  const count = nodes[0] * nodes[1] * nodes[2];
  const totals = cones ? new Uint8Array(count) : null;
  const sides = new Uint8Array(count);
  const find = (node: number): boolean => {
    const k = Math.floor(node / step[2]);
    const j = Math.floor((node - k * step[2]) / step[1]);
    const i = node - k * step[2] - j * step[1];
    const [x, y, z] = [origin[0] + i * spacing, origin[1] + j * spacing, origin[2] + k * spacing];
    const isRim =
      i === 0 ||
      j === 0 ||
      k === 0 ||
      i === nodes[0] - 1 ||
      j === nodes[1] - 1 ||
      k === nodes[2] - 1;
    if (isRim) return false;
    if (!totals) return isInsideAt(x, y, z);
    const open = hasCones ? cone.windingAt(x, y, z) : 0;
    totals[node] = takeFromNeighbour(node, step, totals, walls);
    if (totals[node] === 0) {
      const total = Math.round(windingAt(x, y, z) + open);
      totals[node] = shift + Math.max(-mostTurns, Math.min(mostTurns, total));
    }
    return facing * (totals[node] - shift - open) > insideFrom;
  };
  const isInside = (node: number): boolean => {
    if (sides[node] === 0) sides[node] = find(node) ? 2 : 1;
    return sides[node] === 2;
  };
  const isInsideOn = (node: number, axis: number, share: number): boolean => {
    const k = Math.floor(node / step[2]);
    const j = Math.floor((node - k * step[2]) / step[1]);
    const i = node - k * step[2] - j * step[1];
    const x = origin[0] + (i + (axis === 0 ? share : 0)) * spacing;
    const y = origin[1] + (j + (axis === 1 ? share : 0)) * spacing;
    const z = origin[2] + (k + (axis === 2 ? share : 0)) * spacing;
    const edge = coneCrossings ? coneCrossings.edges.find(3 * node + axis) : -1;
    let from = node;
    if (edge >= 0) {
      const { first, last } = coneCrossings!;
      if (last[edge] - first[edge] > sameCrossing) return isInsideAt(x, y, z);
      if (share > first[edge]) from = node + step[axis];
    }
    if (!totals || totals[from] === 0) return isInsideAt(x, y, z);
    return facing * (totals[from] - shift - cone.windingAt(x, y, z)) > insideFrom;
  };
  return { isInside, isInsideOn, isInsideAt };
}

/** The number, as it is kept, of the first neighbour that has one and no triangle in between, or 0. */
function takeFromNeighbour(
  node: number,
  step: SampleGrid['step'],
  totals: Uint8Array,
  walls: readonly EdgeTable[],
): number {
  for (let axis = 0; axis < 3; axis++)
    for (let side = 0; side < 2; side++) {
      const other = side === 0 ? node - step[axis] : node + step[axis];
      if (totals[other] === 0) continue;
      const key = 3 * Math.min(node, other) + axis;
      if (walls[0].find(key) < 0 && (walls.length < 2 || walls[1].find(key) < 0))
        return totals[other];
    }
  return 0;
}
