import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { gridPlans } from './grid-plans.js';
import { defaultWeights } from './objectives.js';
import { isBetter, type PlanNode } from './plan-node.js';
import { partOf } from './plan-part.js';
import { makeProxy } from './proxy.js';
import { makeSearchSpace } from './search-space.js';
import { TreeSearch, type TreeSearchOptions } from './tree-search.js';

/** Cuts tried at every node of the plan that is being improved, pass after pass. */
const IMPROVE_WIDTHS = [5, 10, 20];
/** Inner-loop steps of one search: about three seconds on one core of 2024. */
const WORK_BUDGET = 0.42e9;

export interface FoundPlans {
  /** Plans on the proxy, the best first. */
  readonly plans: PlanNode[];
  readonly options: Omit<TreeSearchOptions, 'space' | 'onStep'>;
}

export interface PlanSearch {
  readonly mesh: TriangleMesh;
  readonly space: BuildSpace;
  readonly seed: number;
  readonly toleranceMm: number;
  /** A proved lower bound: a plan of so few pieces is not improved further. */
  readonly leastPieces: number;
  /** Share of the usual work. */
  readonly effort: number;
  /** Called often with the part of the work done; may throw to cancel. */
  readonly onProgress: (fraction: number) => void;
}

/**
 * Finds plans on a proxy of the model: the best axis grid, a greedy plan, and the improvement of
 * the better one.
 */
export function searchPlans(input: PlanSearch): FoundPlans {
  const { mesh, space, seed, toleranceMm, leastPieces, onProgress } = input;
  const budget = WORK_BUDGET * input.effort;
  const proxy = makeProxy(mesh);
  const searchSpace = makeSearchSpace(space, proxy.deviationMm, toleranceMm);
  const options = { weights: defaultWeights, seed };
  const search: TreeSearch = new TreeSearch({
    ...options,
    space: searchSpace,
    onStep: () => onProgress(Math.min(1, search.work / budget)),
  });
  const part = partOf(proxy.mesh, searchSpace);
  const plans = [search.greedy(part), ...gridPlans(part, searchSpace).slice(0, 1)].sort(byMerit);
  let best = plans[0];
  for (const width of IMPROVE_WIDTHS) {
    if (best.pieces <= leastPieces || search.work >= budget) break;
    best = search.improve(best, width, budget);
  }
  return { plans: [best, ...plans].sort(byMerit), options };
}

function byMerit(a: PlanNode, b: PlanNode): number {
  return isBetter(a, b) ? -1 : isBetter(b, a) ? 1 : 0;
}
