import { type Body, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { gridCell, spaceInWords } from '../../shared/geometry/fitting/space-measures.js';
import { splitIntoSolids } from '../../shared/geometry/mesh/solids.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { type JobContext } from '../runtime/job-context.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { explainTree } from './cut-reasons.js';
import { bestExactGrid, gridTree } from './exact-grids.js';
import { cutExactly, type ExactCutting, type ExactPlan, planeTreeOf } from './exact-plan.js';
import { lowerBound } from './lower-bound.js';
import { estimatePieces } from './piece-estimate.js';
import { type PlanNode } from './plan-node.js';
import { repairPlan } from './repair-plan.js';
import { searchPlans } from './search-plans.js';

/** More pieces than this are refused. */
export const MOST_PIECES = 400;

export interface PlanInput {
  /** The exact solid, closed and outward, mm. */
  mesh: TriangleMesh;
  space: BuildSpace;
  seed: number;
  triangulate: PolygonTriangulator;
  /** How far an exact cut may move from where it is wanted, mm. */
  toleranceMm: number;
  context: JobContext;
  /** Share of the usual work that the search may do; less is faster and may find more pieces. */
  effort?: number;
}

export interface PlanChoice {
  /** Offsets as really used; every cut says why it is there. */
  tree: CutTree;
  /** The exact pieces, all of which fit. */
  bodies: Body[];
  bounds: { pieces: number; reason: string; gridPieces: number };
  searchMs: number;
  cutMs: number;
}

/**
 * Chooses where to cut: searches on a light proxy, cuts the exact model, mends what is over, and
 * never returns more pieces than the best axis grid has after its exact cut. The tree applies to
 * the whole model: a plane cuts everything in its part, so loose solids are first parted by planes
 * that touch none of them where such planes exist, and count as pieces of their own.
 *
 * The same mesh and seed give the same plan. Throws a JobRefusal when more than MOST_PIECES pieces
 * would be needed, the context's AbortError when cancelled.
 */
export function choosePlan(input: PlanInput): PlanChoice {
  const { mesh, space, seed, toleranceMm, context } = input;
  const startMs = performance.now();
  const report = steadyReport(context);
  const cutting = (from: number, to: number, tolerance = toleranceMm): ExactCutting => ({
    mesh,
    space,
    triangulate: input.triangulate,
    toleranceMm: tolerance,
    onStep: (part) => report('Cutting the exact model', from + (to - from) * part),
  });
  report('Looking at the model', 0);
  const uncut = cutExactly({ kind: 'leaf' }, cutting(0, 0.03));
  const bound = lowerBound(splitIntoSolids(mesh), space);
  if (uncut.over.length === 0) {
    const pieces = uncut.bodies.length;
    const reason = uncutWords(pieces, space);
    const searchMs = performance.now() - startMs;
    const bounds = { pieces, reason, gridPieces: pieces };
    return { tree: { kind: 'leaf' }, bodies: uncut.bodies, bounds, searchMs, cutMs: 0 };
  }
  refuseOver(Math.max(bound.pieces, estimatePieces(mesh, space)), space);
  const found = searchPlans({
    mesh,
    space,
    seed,
    toleranceMm,
    leastPieces: bound.pieces,
    effort: input.effort ?? 1,
    onProgress: (part) => report('Searching for cuts', 0.05 + 0.5 * part),
  });
  refuseOver(found.plans[0].pieces, space);
  const searchedMs = performance.now();
  const options = { ...found.options, onStep: () => context.throwIfCancelled() };
  let best: ExactPlan | null = null;
  const consider = (tree: PlaneTree, cuttingWith: ExactCutting): void => {
    const exact = repairPlan(cutExactly(tree, cuttingWith), cuttingWith, options);
    if (exact && (!best || exact.bodies.length < best.bodies.length)) best = exact;
  };
  const isWorse = (pieces: number) => best !== null && pieces >= best.bodies.length;
  for (const plan of byRisingPieces(found.plans)) {
    if (isWorse(plan.pieces)) break;
    consider(planeTreeOf(plan), cutting(0.55, 0.75));
  }
  const grid = bestExactGrid(mesh, gridCell(space), toleranceMm, () =>
    report('Comparing with axis grids', 0.8),
  );
  // Cells of exactly the space's size leave no room to place a cut: without it they still fit.
  for (const tolerance of [toleranceMm, 0]) {
    if (!isWorse(grid.pieces)) consider(gridTree(grid.grid), cutting(0.85, 0.95, tolerance));
  }
  if (!best) throw new Error('No plan could be made to fit.');
  const { tree, bodies, offsets }: ExactPlan = best;
  refuseOver(bodies.length, space);
  report('Cutting the exact model', 1);
  return {
    tree: explainTree(tree, bodies, offsets, space),
    bodies,
    bounds: { pieces: bound.pieces, reason: bound.reason, gridPieces: grid.pieces },
    searchMs: searchedMs - startMs,
    cutMs: performance.now() - searchedMs,
  };
}

/** Progress that never falls, and a look at the cancel flag with every report. */
function steadyReport(context: JobContext): (stage: string, fraction: number) => void {
  let reached = 0;
  return (stage, fraction) => {
    context.throwIfCancelled();
    reached = Math.max(reached, fraction);
    context.progress(stage, reached);
  };
}

/** The first plan of every piece count; plans come best first. */
function byRisingPieces(plans: readonly PlanNode[]): PlanNode[] {
  return plans.filter((plan, k) => k === 0 || plan.pieces > plans[k - 1].pieces);
}

function uncutWords(bodies: number, space: BuildSpace): string {
  return bodies === 1
    ? `1 piece: the model fits ${spaceInWords(space)} whole and is not cut.`
    : `${bodies} pieces: the model's ${bodies} loose solids each fit ${spaceInWords(space)} and none is cut.`;
}

function refuseOver(pieces: number, space: BuildSpace): void {
  if (pieces <= MOST_PIECES) return;
  throw new JobRefusal(
    `This model would need about ${pieces} pieces in ${spaceInWords(space)}; at most ${MOST_PIECES} are planned. Choose a larger envelope or make the model smaller.`,
  );
}
