import { applyTree, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { axisGrids, type GridOffsets } from './grid-plans.js';
import { signedFan } from './signed-fan.js';

export interface BestGrid {
  readonly pieces: number;
  readonly grid: GridOffsets;
}

const AXES: readonly Vector3[] = [
  [1, 0, 0],
  [0, 1, 0],
  [0, 0, 1],
];

/**
 * The axis grid of the fewest pieces, loose fragments counted after its exact cut. A grid whose
 * occupied cells alone are as many as the best count so far cannot win and is not cut: a cell with
 * a vertex inside holds at least one piece.
 * @param cell sides of the space, mm
 * @param onStep called between cuts; may throw to cancel
 */
export function bestExactGrid(
  mesh: TriangleMesh,
  cell: readonly [number, number, number],
  toleranceMm: number,
  onStep: () => void,
): BestGrid {
  const { min, size } = boundingBox(mesh.positions);
  const grids = axisGrids(min, size, cell)
    .map((grid) => ({ grid, occupied: occupiedCells(mesh.positions, grid, 2 * toleranceMm) }))
    .sort((a, b) => a.occupied - b.occupied);
  let best: BestGrid | null = null;
  for (const { grid, occupied } of grids) {
    if (best && occupied >= best.pieces) break;
    const { bodies } = applyTree(mesh, gridTree(grid), {
      triangulate: signedFan,
      toleranceMm,
      onCut: onStep,
    });
    const pieces = bodies.filter((body) => signedVolume(body.mesh) > 0).length;
    if (!best || pieces < best.pieces) best = { pieces, grid };
  }
  return best ?? { pieces: 0, grid: [[], [], []] };
}

/** All planes of a grid through everything, as a balanced tree. */
export function gridTree(grid: GridOffsets): PlaneTree {
  const axis = grid.findIndex((offsets) => offsets.length > 0);
  if (axis < 0) return { kind: 'leaf' };
  const offsets = grid[axis];
  const middle = offsets.length >> 1;
  const within = (kept: readonly number[]): GridOffsets => {
    const [x, y, z] = grid;
    return axis === 0 ? [kept, y, z] : axis === 1 ? [x, kept, z] : [x, y, kept];
  };
  return {
    kind: 'cut',
    plane: { normal: AXES[axis], offset: offsets[middle] },
    above: gridTree(within(offsets.slice(middle + 1))),
    below: gridTree(within(offsets.slice(0, middle))),
  };
}

/** Cells that hold a vertex farther than `clearMm` from every cut. */
function occupiedCells(positions: Float64Array, grid: GridOffsets, clearMm: number): number {
  const cells = new Set<number>();
  const [xs, ys, zs] = grid;
  const place = (at: number, offsets: readonly number[]): number => {
    let k = 0;
    while (k < offsets.length && offsets[k] < at) k++;
    if (k < offsets.length && offsets[k] - at <= clearMm) return -1;
    return k > 0 && at - offsets[k - 1] <= clearMm ? -1 : k;
  };
  for (let k = 0; k < positions.length; k += 3) {
    const x = place(positions[k], xs);
    const y = place(positions[k + 1], ys);
    const z = place(positions[k + 2], zs);
    if (x < 0 || y < 0 || z < 0) continue;
    cells.add((x * (ys.length + 1) + y) * (zs.length + 1) + z);
  }
  return cells.size;
}
