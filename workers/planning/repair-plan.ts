import { type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import {
  cutExactly,
  type ExactCutting,
  type ExactPlan,
  leafPath,
  listCuts,
  planeTreeOf,
  keepsZones,
  replaceAt,
  withOffsets,
  zonesOfLeaf,
} from './exact-plan.js';
import { type PlanZone } from './judging/plan-zone.js';
import { HOPELESS_PIECES } from './plan-node.js';
import { joinMeshes, partOf } from './plan-part.js';
import { makeProxy } from './proxy.js';
import { type Judging, makeSearchSpace } from './search-space.js';
import { TreeSearch, type TreeSearchOptions } from './tree-search.js';

/** How the leaves that have to be planned again are searched. */
export interface RepairSearch extends Omit<TreeSearchOptions, 'space'> {
  readonly judging: Judging;
  readonly zones: readonly PlanZone[];
}

/** Over by more than this, a body is planned again rather than its cuts moved, mm. */
const MOST_NUDGE_MM = 3;
/** Beyond the excess, so that placing the cut cannot bring it back, mm. */
const NUDGE_SPARE_MM = 0.06;
const MOST_ROUNDS = 24;
const CUTS_TRIED = 4;

/**
 * Mends a plan some of whose exact bodies are over the space: first a cut that bounds the body is
 * moved towards it by the excess; when no such move helps, what lies in that leaf is planned again
 * by itself and grafted in. Locked cuts stay, zones are kept. Returns a plan without excess, or null
 * when it gives up.
 */
export function repairPlan(
  plan: ExactPlan,
  cutting: ExactCutting,
  search: RepairSearch,
): ExactPlan | null {
  let current: ExactPlan | null = plan;
  for (let round = 0; current && current.over.length > 0; round++) {
    if (round === MOST_ROUNDS) return null;
    current = nudge(current, cutting, search.zones) ?? graft(current, cutting, search);
  }
  return current && keepsZones(current.tree, search.zones) ? current : null;
}

/** Moves one cut of the first body that is over; null when that makes nothing better. */
function nudge(
  plan: ExactPlan,
  cutting: ExactCutting,
  zones: readonly PlanZone[],
): ExactPlan | null {
  const { body, byMm } = plan.over[0];
  if (byMm > MOST_NUDGE_MM) return null;
  const cuts = listCuts(plan.tree);
  const bounding = [...new Set(body.mesh.tags ?? [])]
    .filter((tag) => tag > 0 && !cuts[tag - 1].locked)
    .sort((a, b) => b - a);
  for (const tag of bounding.slice(0, CUTS_TRIED)) {
    const isAbove = leafPath(body)[cuts[tag - 1].path.length] === 'a';
    const offsets = [...plan.offsets];
    offsets[tag - 1] += (isAbove ? 1 : -1) * (byMm + NUDGE_SPARE_MM);
    const tree = withOffsets(plan.tree, offsets);
    if (!keepsZones(tree, zones)) continue;
    const moved = cutExactly(tree, cutting);
    const isBetter = moved.over.length < plan.over.length;
    if (isBetter && moved.bodies.length <= plan.bodies.length) return moved;
  }
  return null;
}

function graft(plan: ExactPlan, cutting: ExactCutting, search: RepairSearch): ExactPlan | null {
  const { body, byMm } = plan.over[0];
  const path = leafPath(body);
  const inLeaf = plan.bodies.filter((other) => leafPath(other) === path);
  const { mesh, deviationMm } = makeProxy(joinMeshes(inLeaf.map((other) => other.mesh)));
  const excess = Math.min(byMm, MOST_NUDGE_MM) + NUDGE_SPARE_MM;
  const { judging } = search;
  const space = makeSearchSpace(cutting.spaces, deviationMm + excess, cutting.toleranceMm, judging);
  const zones = zonesOfLeaf(plan.tree, path, search.zones);
  if (!zones) return null;
  const replanned = new TreeSearch({ ...search, space }).greedy(partOf(mesh, space, zones));
  if (replanned.pieces >= HOPELESS_PIECES) return null;
  const subtree: PlaneTree = planeTreeOf(replanned);
  return cutExactly(replaceAt(plan.tree, path, subtree), cutting);
}
