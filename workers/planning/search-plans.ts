import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type PlanWishes, preferencePresets } from '../../shared/jobs/plan-wishes.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { gridPlans } from './grid-plans.js';
import { findMirrors, mirrored } from './judging/find-mirror.js';
import { partZones, type PlanZone } from './judging/plan-zone.js';
import { measureWorth, nameTriangles } from './judging/surface-worth.js';
import { type PlanWeights, weightsOf } from './objectives.js';
import { cutOf, HOPELESS_PIECES, isBetter, type PlanNode, recost } from './plan-node.js';
import { partOf, type PlanPart, splitPart } from './plan-part.js';
import { makeProxy } from './proxy.js';
import { type Judging, makeSearchSpace, type SearchSpace } from './search-space.js';
import { TreeSearch } from './tree-search.js';

/** Cuts tried at every node of the plan that is being improved, pass after pass. */
const IMPROVE_WIDTHS = [5, 10, 20];
/** Inner-loop steps of the search by the person's own weights: about three seconds on one core of 2024. */
const WORK_BUDGET = 0.45e9;
/** Searches that lean to one side get this share of it; the one for few pieces is the hardest. */
const LEANING_SHARE = 0.3;
const FEW_PIECES_SHARE = 0.8;

/** Preferences between few pieces and little support, where many good plans lie. */
const BETWEEN = { fewPieces: 0.85, littleSupport: 0.5, hiddenSeams: 0.4, sturdySeams: 0.3 };

export interface FoundPlans {
  /** Plans on the proxy, the best by the person's weights first; at least one. */
  readonly plans: PlanNode[];
  readonly weights: PlanWeights;
  readonly judging: Judging;
  readonly mirrors: readonly Plane[];
  /** From the start of the search to the first plan. */
  readonly firstPlanMs: number;
}

export interface PlanSearch {
  readonly mesh: TriangleMesh;
  readonly spaces: readonly BuildSpace[];
  readonly wishes: PlanWishes;
  readonly keepWhole: readonly PlanZone[];
  readonly showZones: readonly PlanZone[];
  readonly seed: number;
  readonly toleranceMm: number;
  /** A proved lower bound: a plan of so few pieces is not improved for fewer. */
  readonly leastPieces: number;
  /** Share of the usual work. */
  readonly effort: number;
  /** Called often with the part of the work done and the best number of pieces; may throw to cancel. */
  readonly onProgress: (fraction: number, bestPieces: number | null) => void;
  /** Whether the person takes what there is. */
  readonly isEnough: () => boolean;
}

/**
 * Finds plans on a proxy of the model: by the person's weights, then leaning to each thing that
 * plans are compared by, a mirrored one where the model is its own mirror image, and the best axis
 * grid. Throws a JobRefusal when locked cuts and zones contradict each other or leave no plan.
 */
export function searchPlans(input: PlanSearch): FoundPlans {
  const startMs = performance.now();
  const { wishes, seed, effort } = input;
  const proxy = makeProxy(input.mesh);
  const judging: Judging = {
    worth: measureWorth(proxy.mesh, wishes.showDirections, input.showZones),
    overhangDegrees: wishes.overhangDegrees,
  };
  const space = makeSearchSpace(input.spaces, proxy.deviationMm, input.toleranceMm, judging);
  const part = partOf(nameTriangles(proxy.mesh), space, input.keepWhole);
  const own = weightsOf(wishes.preferences, wishes.leastPieceMm);
  const leanings = leaningWeights(own, wishes);
  const budget = WORK_BUDGET * effort;
  const total = budget * (1 + FEW_PIECES_SHARE + LEANING_SHARE * leanings.length);
  const found: PlanNode[] = [];
  let before = 0;
  let firstPlanMs = 0;
  let typical = 0;
  const add = (plan: PlanNode | null) => {
    if (!plan || plan.pieces >= HOPELESS_PIECES) return;
    if (found.length === 0) firstPlanMs = performance.now() - startMs;
    found.push(plan);
  };
  const begin = (weights: PlanWeights, giveUpAt = Infinity): TreeSearch => {
    const search: TreeSearch = new TreeSearch({
      space,
      weights,
      seed,
      giveUpAt,
      supportPerCellMm3: typical,
      isEnough: () => found.length > 0 && input.isEnough(),
      onStep: () => input.onProgress(Math.min(1, (before + search.work) / total), fewest(found)),
    });
    return search;
  };
  const improve = (search: TreeSearch, plan: PlanNode, weights: PlanWeights, limit: number) => {
    let best = plan;
    for (const width of IMPROVE_WIDTHS) {
      if (weights.isPiecesFirst && best.pieces <= input.leastPieces) break;
      if (search.isOver(limit)) break;
      best = search.improve(best, width, limit);
      add(best);
    }
  };

  // Few pieces first: that search cannot go astray, and tells how much support is usual. The
  // person's own comes last and begins with the best of all that was found.
  const order = [
    ...leanings.filter((one) => one.isPiecesFirst),
    ...leanings.filter((one) => !one.isPiecesFirst),
    own,
  ];
  for (const weights of order) {
    const share = weights === own ? 1 : weights.isPiecesFirst ? FEW_PIECES_SHARE : LEANING_SHARE;
    const limit = share * budget;
    const search = begin(weights, found.length > 0 ? limit : Infinity);
    const first = search.around(part, wishes.lockedCuts);
    if (!first) throw contradiction(wishes, input.keepWhole, part);
    add(first);
    if (typical === 0 && first.pieces < HOPELESS_PIECES) typical = first.supportMm3 / first.pieces;
    if (weights === own && wishes.lockedCuts.length === 0)
      for (const plan of gridPlans(part, space, own).slice(0, 1)) add(plan);
    improve(search, bestOf(found, weights) ?? first, weights, limit);
    before += search.work;
    if (found.length > 0 && input.isEnough()) break;
  }
  const mirrors = findMirrors(proxy.mesh);
  if (mirrors.length > 0 && wishes.lockedCuts.length === 0 && !input.isEnough()) {
    const search = begin(own);
    add(mirrorPlan(search, part, mirrors[0], space, LEANING_SHARE * budget, own));
    before += search.work;
  }
  if (found.length === 0)
    throw new JobRefusal(
      'No plan was found that keeps all zones whole: some part that is too large can only be cut through a zone. Make the zones smaller or choose a larger envelope.',
    );
  const plans = found
    .map((plan, k) => ({ plan: recost(plan, own), k }))
    .sort((a, b) =>
      isBetter(a.plan, b.plan, own) ? -1 : isBetter(b.plan, a.plan, own) ? 1 : a.k - b.k,
    )
    .map(({ plan }) => plan);
  return { plans, weights: own, judging, mirrors, firstPlanMs };
}

/** The best of the plans by these weights, whatever they were found by. */
function bestOf(plans: readonly PlanNode[], weights: PlanWeights): PlanNode | null {
  if (plans.length === 0) return null;
  return plans
    .map((plan) => recost(plan, weights))
    .reduce((a, b) => (isBetter(b, a, weights) ? b : a));
}

function fewest(plans: readonly PlanNode[]): number | null {
  return plans.length === 0 ? null : Math.min(...plans.map((plan) => plan.pieces));
}

/** Weights that care for one thing above all, those like the person's own left out. */
function leaningWeights(own: PlanWeights, { leastPieceMm }: PlanWishes): PlanWeights[] {
  const known = new Set([JSON.stringify(own)]);
  return [...preferencePresets.map(({ preferences }) => preferences), BETWEEN]
    .map((preferences) => weightsOf(preferences, leastPieceMm))
    .filter((weights) => {
      const key = JSON.stringify(weights);
      return !known.has(key) && known.add(key);
    });
}

/** Cuts in the mirror plane, plans one half, and makes the same cuts on the other. */
function mirrorPlan(
  search: TreeSearch,
  part: PlanPart,
  mirror: Plane,
  space: SearchSpace,
  budget: number,
  weights: PlanWeights,
): PlanNode | null {
  if (!partZones(part.zones, mirror)) return null;
  const half = search.around(part, [mirror], 'mirror');
  if (!half || half.kind === 'leaf') return half;
  let above = half.above;
  for (const width of IMPROVE_WIDTHS) {
    if (search.isOver(budget)) break;
    above = search.improve(above, width, budget);
  }
  const split = splitPart(part, mirror, space);
  // Zones need not be mirrored: then the other half is planned by itself.
  const below =
    part.zones.length > 0
      ? half.below
      : search.replay(split.below, above, (plane) => mirrored(plane, mirror));
  const isSame = below.pieces < HOPELESS_PIECES && below.pieces === above.pieces;
  const other = isSame || isBetter(below, half.below, weights) ? below : half.below;
  return cutOf(part, mirror, 'mirror', half.own, above, other, weights);
}

/** Why locked cuts and zones cannot both be kept. */
function contradiction(
  { lockedCuts }: PlanWishes,
  zones: readonly PlanZone[],
  { bodies }: PlanPart,
): JobRefusal {
  for (const [k, plane] of lockedCuts.entries())
    for (const zone of zones)
      if (!partZones([zone], plane))
        return new JobRefusal(
          `Your own cut ${k + 1} crosses the keep-whole zone “${zone.name}”. Move one of the two.`,
        );
  return new JobRefusal(`Your own cuts leave no plan for ${bodies.length} bodies.`);
}
