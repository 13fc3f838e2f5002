import { gridCell } from '../../shared/geometry/fitting/space-measures.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { wholeCells } from './fit-frames.js';
import { partZones } from './judging/plan-zone.js';
import { sectionSight } from './judging/section-sight.js';
import { type PlanWeights } from './objectives.js';
import { cutOf, leafOf, type PlanNode } from './plan-node.js';
import { fitsWhole, type PlanPart, splitPart } from './plan-part.js';
import { type SearchSpace } from './search-space.js';

/** Cells of full size are this much smaller than the space, so that placing cuts keeps them in. */
const FULL_SPARE_MM = 0.06;

/** Cut positions along x, y and z, mm, ascending. */
export type GridOffsets = readonly [readonly number[], readonly number[], readonly number[]];

/**
 * The axis grids over a box: for every distinct assignment of the space's sides to the axes, cuts
 * at even distances, and cuts at full sides from the lower end; doubles are left out.
 */
export function axisGrids(
  min: Vector3,
  size: Vector3,
  cell: readonly [number, number, number],
): GridOffsets[] {
  const grids = new Map<string, GridOffsets>();
  for (const [i, j, k] of PERMUTATIONS) {
    const sides = [cell[i], cell[j], cell[k]];
    for (const isEven of [true, false]) {
      const along = (axis: number): number[] => {
        const parts = wholeCells(size[axis] / sides[axis]);
        const full = sides[axis] - FULL_SPARE_MM;
        const step = isEven || full * parts < size[axis] ? size[axis] / parts : full;
        return Array.from({ length: parts - 1 }, (_, n) => min[axis] + step * (n + 1));
      };
      const grid: GridOffsets = [along(0), along(1), along(2)];
      grids.set(JSON.stringify(grid), grid);
    }
  }
  return [...grids.values()];
}

const PERMUTATIONS = [
  [0, 1, 2],
  [0, 2, 1],
  [1, 0, 2],
  [1, 2, 0],
  [2, 0, 1],
  [2, 1, 0],
] as const;

const AXES: readonly Vector3[] = [
  [1, 0, 0],
  [0, 1, 0],
  [0, 0, 1],
];

/** A grid as a plan: halves the longest run of cells first and stops where everything fits. */
export function gridPlan(
  part: PlanPart,
  grid: GridOffsets,
  space: SearchSpace,
  weights: PlanWeights,
): PlanNode | null {
  if (fitsWhole(part)) return leafOf(part, space, weights);
  const axis = [0, 1, 2].reduce((a, b) => (grid[b].length > grid[a].length ? b : a));
  const offsets = grid[axis];
  if (offsets.length === 0) return null;
  const middle = offsets.length >> 1;
  const plane = { normal: AXES[axis], offset: offsets[middle] };
  if (!partZones(part.zones, plane)) return null;
  const { above, below, seamMm2, bendingKpa } = splitPart(part, plane, space);
  const within = (kept: readonly number[]): GridOffsets => {
    const [x, y, z] = grid;
    return axis === 0 ? [kept, y, z] : axis === 1 ? [x, kept, z] : [x, y, kept];
  };
  const upper = gridPlan(above, within(offsets.slice(middle + 1)), space, weights);
  const lower = upper && gridPlan(below, within(offsets.slice(0, middle)), space, weights);
  if (!upper || !lower) return null;
  const sightMm = sectionSight(part, plane, space);
  const commonCost = (weights.seam * seamMm2) / space.leastSideMm ** 2;
  const own = { commonCost, sightMm, bendingKpa };
  return cutOf(part, plane, 'grid', own, upper, lower, weights);
}

/** All grid plans of a part on the proxy, the fewest pieces first. */
export function gridPlans(part: PlanPart, space: SearchSpace, weights: PlanWeights): PlanNode[] {
  const points = part.bodies.map((body) => boundingBox(body.mesh.positions));
  const edge = (side: 'min' | 'max', pick: (...values: number[]) => number): Vector3 => [
    pick(...points.map((box) => box[side][0])),
    pick(...points.map((box) => box[side][1])),
    pick(...points.map((box) => box[side][2])),
  ];
  const min = edge('min', Math.min);
  const max = edge('max', Math.max);
  const size: Vector3 = [max[0] - min[0], max[1] - min[1], max[2] - min[2]];
  const found: PlanNode[] = [];
  for (const real of space.spaces)
    for (const grid of axisGrids(min, size, gridCell(real))) {
      const plan = gridPlan(part, grid, space, weights);
      if (plan) found.push(plan);
    }
  return found.sort((a, b) => a.pieces - b.pieces || a.cost - b.cost);
}
