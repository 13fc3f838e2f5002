import { type Body } from '../../shared/geometry/cutting/apply-tree.js';
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
import { lowerBound, type PieceBound } from './lower-bound.js';
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
  const { mesh, space, seed, triangulate, toleranceMm, context } = input;
  const startMs = performance.now();
  const report = (stage: string, fraction: number) => {
    context.throwIfCancelled();
    context.progress(stage, fraction);
  };
  const cutting = (from: number, to: number): ExactCutting => ({
    mesh,
    space,
    triangulate,
    toleranceMm,
    onStep: (part) => report('Cutting the exact model', from + (to - from) * part),
  });
  report('Looking at the model', 0);
  const uncut = cutExactly({ kind: 'leaf' }, cutting(0, 0.03));
  const bound = lowerBound(splitIntoSolids(mesh), space);
  if (uncut.over.length === 0) {
    const searchMs = performance.now() - startMs;
    return chosen(uncut, onePieceWords(bound, uncut.bodies.length, space), uncut.bodies.length);
    function chosen(plan: ExactPlan, reason: string, gridPieces: number): PlanChoice {
      return {
        tree: { kind: 'leaf' },
        bodies: plan.bodies,
        bounds: { pieces: bound.pieces, reason, gridPieces },
        searchMs,
        cutMs: 0,
      };
    }
  }
  refuseOver(Math.max(bound.pieces, estimatePieces(mesh, space)), space);
  report('Searching for cuts', 0.05);
  const found = searchPlans(mesh, space, seed, toleranceMm, (part) =>
    report('Searching for cuts', 0.05 + 0.5 * part),
  );
  refuseOver(found.plans[0].pieces, space);
  const searchedMs = performance.now();
  const searchOptions = { ...found.options, onStep: () => context.throwIfCancelled() };
  const mend = (plan: ExactPlan, from: number, to: number) =>
    repairPlan(plan, cutting(from, to), searchOptions);
  let best: ExactPlan | null = null;
  const byPieces = uniqueByPieces(found.plans);
  for (const plan of byPieces) {
    if (best && plan.pieces >= best.bodies.length) break;
    const exact = mend(cutExactly(planeTreeOf(plan), cutting(0.55, 0.75)), 0.7, 0.75);
    if (exact && (!best || exact.bodies.length < best.bodies.length)) best = exact;
  }
  report('Comparing with axis grids', 0.75);
  const grid = bestExactGrid(mesh, gridCell(space), toleranceMm, () =>
    report('Comparing with axis grids', 0.8),
  );
  if (!best || grid.pieces < best.bodies.length) {
    const exact = mend(cutExactly(gridTree(grid.grid), cutting(0.85, 0.95)), 0.9, 0.95);
    if (exact && (!best || exact.bodies.length < best.bodies.length)) best = exact;
  }
  if (!best) throw new Error('No plan could be made to fit.');
  refuseOver(best.bodies.length, space);
  report('Cutting the exact model', 1);
  return {
    tree: explainTree(best.tree, best.bodies, best.offsets, space),
    bodies: best.bodies,
    bounds: { pieces: bound.pieces, reason: bound.reason, gridPieces: grid.pieces },
    searchMs: searchedMs - startMs,
    cutMs: performance.now() - searchedMs,
  };
}

/** Plans of ever fewer pieces on the proxy come first; of equal ones the first counts. */
function uniqueByPieces(plans: readonly PlanNode[]): PlanNode[] {
  return plans.filter((plan, k) => k === 0 || plan.pieces > plans[k - 1].pieces);
}

function onePieceWords(bound: PieceBound, bodies: number, space: BuildSpace): string {
  return bodies === 1
    ? `1 piece: the model fits ${spaceInWords(space)} whole and is not cut.`
    : `${bound.pieces} pieces: the model's ${bodies} loose solids each fit ${spaceInWords(space)} and none is cut.`;
}

function refuseOver(pieces: number, space: BuildSpace): void {
  if (pieces <= MOST_PIECES) return;
  throw new JobRefusal(
    `This model would need about ${pieces} pieces in ${spaceInWords(space)}; at most ${MOST_PIECES} are planned. Choose a larger envelope or make the model smaller.`,
  );
}
