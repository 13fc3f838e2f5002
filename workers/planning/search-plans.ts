import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { gridPlans } from './grid-plans.js';
import { defaultWeights } from './objectives.js';
import { isBetter, type PlanNode } from './plan-node.js';
import { partOf } from './plan-part.js';
import { makeProxy } from './proxy.js';
import { makeSearchSpace } from './search-space.js';
import { TreeSearch, type TreeSearchOptions } from './tree-search.js';

/** Cuts tried at every node of the plan that is being improved. */
const IMPROVE_WIDTH = 6;
/** Triangles swept or cut in one search: about four seconds on one core. */
const WORK_BUDGET = 24e6;

export interface FoundPlans {
  /** Plans on the proxy, the best first. */
  readonly plans: PlanNode[];
  readonly options: Omit<TreeSearchOptions, 'space' | 'onStep'>;
}

/**
 * Finds plans on a proxy of the model: the axis grids, a greedy plan, and the improvement of the
 * best two of these.
 * @param onProgress called often with the part of the work done; may throw to cancel
 */
export function searchPlans(
  mesh: TriangleMesh,
  space: BuildSpace,
  seed: number,
  toleranceMm: number,
  onProgress: (fraction: number) => void,
): FoundPlans {
  const proxy = makeProxy(mesh);
  const searchSpace = makeSearchSpace(space, proxy.deviationMm, toleranceMm);
  const options = { weights: defaultWeights, seed };
  const search: TreeSearch = new TreeSearch({
    ...options,
    space: searchSpace,
    onStep: () => onProgress(Math.min(1, search.work / WORK_BUDGET)),
  });
  const part = partOf(proxy.mesh, searchSpace);
  const plans = [search.greedy(part), ...gridPlans(part, searchSpace).slice(0, 1)];
  plans.sort(byMerit);
  plans.unshift(search.improve(plans[0], IMPROVE_WIDTH, WORK_BUDGET));
  return { plans: plans.sort(byMerit), options };
}

function byMerit(a: PlanNode, b: PlanNode): number {
  return isBetter(a, b) ? -1 : isBetter(b, a) ? 1 : 0;
}
