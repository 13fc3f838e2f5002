import { type Body, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { gridCell, spaceInWords } from '../../shared/geometry/fitting/space-measures.js';
import { splitIntoSolids } from '../../shared/geometry/mesh/solids.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Offer } from '../../shared/jobs/plan-make.js';
import { type PlanWishes } from '../../shared/jobs/plan-wishes.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { type JobContext } from '../runtime/job-context.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { explainTree } from './cut-reasons.js';
import { type BestGrid, bestExactGrid, gridTree } from './exact-grids.js';
import {
  cutExactly,
  type ExactCutting,
  type ExactPlan,
  keepsZones,
  planeTreeOf,
} from './exact-plan.js';
import { type ExactFigures, measurePlan } from './judging/exact-figures.js';
import { planZone, type PlanZone } from './judging/plan-zone.js';
import { bestPlan, pickCandidates, sortOffers } from './judging/pick-offers.js';
import { measureWorth } from './judging/surface-worth.js';
import { gapInWords, lowerBound, type PieceBound } from './lower-bound.js';
import { estimatePieces } from './piece-estimate.js';
import { makeProxy } from './proxy.js';
import { repairPlan } from './repair-plan.js';
import { type FoundPlans, searchPlans } from './search-plans.js';

/** More pieces than this are refused. */
export const MOST_PIECES = 400;

export interface PlanInput {
  /** The exact solid, closed and outward, mm. */
  mesh: TriangleMesh;
  /** A piece goes to the first that holds it; at least one. */
  spaces: readonly BuildSpace[];
  wishes: PlanWishes;
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
  figures: ExactFigures;
  /** Plans of which none is better than another in everything; the chosen one is among them. */
  offers: Offer[];
  /** Its place among the offers; null when the tree was given. */
  chosenOffer: number | null;
  bounds: { pieces: number; reason: string; gap: string; gridPieces: number };
  searchMs: number;
  cutMs: number;
  /** From the start to the first plan of the search; 0 when nothing had to be searched. */
  firstPlanMs: number;
}

/** An exact plan with what it amounts to. */
export interface MeasuredPlan extends ExactPlan {
  readonly figures: ExactFigures;
}

/**
 * Chooses where to cut: searches on a light proxy, cuts the most promising plans on the exact
 * model, mends what is over, and offers those of which none is better than another in everything.
 * None has more pieces than the best axis grid has after its exact cut, unless locked cuts or
 * zones ask for it. The tree applies to the whole model: a plane cuts everything in its part, so
 * loose solids are first parted by planes that touch none of them where such planes exist, and
 * count as pieces of their own.
 *
 * The same mesh, wishes and seed give the same plans. Throws a JobRefusal when more than
 * MOST_PIECES pieces would be needed or the wishes contradict each other, the context's AbortError
 * when cancelled.
 */
export function choosePlan(input: PlanInput): PlanChoice {
  const { mesh, spaces, wishes, toleranceMm, context } = input;
  const startMs = performance.now();
  const report = steadyReport(context);
  const keepWhole = wishes.keepWhole.map((zone) => planZone(zone, mesh));
  const showZones = wishes.showZones.map((zone) => planZone(zone, mesh));
  const cutting = (from: number, to: number, tolerance = toleranceMm): ExactCutting => ({
    mesh,
    spaces,
    triangulate: input.triangulate,
    toleranceMm: tolerance,
    onStep: (part) => report('Cutting the exact model', from + (to - from) * part),
  });
  report('Looking at the model', 0);
  const bound = lowerBound(splitIntoSolids(mesh), spaces);
  if (wishes.lockedCuts.length === 0) {
    const uncut = cutExactly({ kind: 'leaf' }, cutting(0, 0.03));
    if (uncut.over.length === 0) return wholeModel(uncut, input, startMs);
  }
  refuseOver(Math.max(bound.pieces, estimatePieces(mesh, spaces)), spaces);
  const grid = bestGrid(mesh, spaces, toleranceMm, () => report('Comparing with axis grids', 0.04));
  const found = searchPlans({
    mesh,
    spaces,
    wishes,
    keepWhole,
    showZones,
    seed: input.seed,
    toleranceMm,
    leastPieces: bound.pieces,
    effort: input.effort ?? 1,
    onProgress: (part, best) =>
      report(
        best === null ? 'Searching for cuts' : `Searching for cuts, ${best} pieces so far`,
        0.05 + 0.6 * part,
      ),
    isEnough: context.isEnough ?? (() => false),
  });
  refuseOver(found.plans[0].pieces, spaces);
  const searchedMs = performance.now();
  const exactly = new ExactCandidates(input, found, keepWhole, cutting, report);
  const isFree = wishes.lockedCuts.length === 0 && keepWhole.length === 0;
  const most = isFree ? grid.pieces : Infinity;
  for (const plan of pickCandidates(found.plans, most, mesh.indices.length / 3))
    exactly.consider(planeTreeOf(plan));
  // Cells of exactly the space's size leave no room to place a cut: without it they still fit.
  for (const tolerance of [toleranceMm, 0])
    if (wishes.lockedCuts.length === 0 && exactly.fewest() > grid.pieces)
      exactly.consider(gridTree(grid.grid), tolerance);
  const plans = exactly.plans.filter(
    (plan) => plan.bodies.length <= Math.max(most, exactly.fewest()),
  );
  if (plans.length === 0) throw new Error('No plan could be made to fit.');
  const chosen = bestPlan(plans, found.weights);
  refuseOver(chosen.bodies.length, spaces);
  const offers = sortOffers(plans, chosen).map(({ plan, bestAt }) => ({
    plan,
    offer: { bestAt, objectives: plan.figures.objectives, tree: explained(plan, input, found) },
  }));
  const chosenOffer = offers.findIndex(({ plan }) => plan === chosen);
  report('Cutting the exact model', 1);
  return {
    tree: offers[chosenOffer].offer.tree,
    bodies: chosen.bodies,
    figures: chosen.figures,
    offers: offers.map(({ offer }) => offer),
    chosenOffer,
    bounds: boundsOf(bound, chosen.bodies.length, grid.pieces),
    searchMs: searchedMs - startMs,
    cutMs: performance.now() - searchedMs,
    firstPlanMs: found.firstPlanMs,
  };
}

/**
 * Makes a plan from a tree that was found before, cut exactly where it says. Throws a JobRefusal
 * when a piece does not fit any of the spaces or a cut crosses a keep-whole zone.
 */
export function remakePlan(input: PlanInput, tree: CutTree): PlanChoice {
  const { mesh, spaces, wishes, context, triangulate } = input;
  const startMs = performance.now();
  const report = steadyReport(context);
  const keepWhole = wishes.keepWhole.map((zone) => planZone(zone, mesh));
  const showZones = wishes.showZones.map((zone) => planZone(zone, mesh));
  if (!keepsZones(tree, keepWhole))
    throw new JobRefusal('A cut of this plan crosses a keep-whole zone.');
  const exact = cutExactly(tree, {
    mesh,
    spaces,
    triangulate,
    toleranceMm: 0,
    onStep: (part) => report('Cutting the exact model', 0.6 * part),
  });
  if (exact.over.length > 0)
    throw new JobRefusal(
      `${exact.over.length === 1 ? 'A piece' : `${exact.over.length} pieces`} of this plan would not fit, the first by ${exact.over[0].byMm.toFixed(1)} mm. Let the rest be planned anew.`,
    );
  const judging = {
    worth: measureWorth(makeProxy(mesh).mesh, wishes.showDirections, showZones),
    overhangDegrees: wishes.overhangDegrees,
  };
  const figures = measurePlan(exact.tree, exact.bodies, exact.offsets, {
    spaces,
    ...judging,
    onStep: (part) => report('Judging the pieces', 0.6 + 0.2 * part),
  });
  const bound = lowerBound(splitIntoSolids(mesh), spaces);
  const grid = bestGrid(mesh, spaces, input.toleranceMm, () =>
    report('Comparing with axis grids', 0.9),
  );
  report('Cutting the exact model', 1);
  return {
    tree: withSameReasons(tree, exact.offsets),
    bodies: exact.bodies,
    figures,
    offers: [],
    chosenOffer: null,
    bounds: boundsOf(bound, exact.bodies.length, grid.pieces),
    searchMs: 0,
    cutMs: performance.now() - startMs,
    firstPlanMs: 0,
  };
}

/** Exact plans made so far; each tree is cut, mended and measured once. */
class ExactCandidates {
  readonly plans: MeasuredPlan[] = [];

  constructor(
    private readonly input: PlanInput,
    private readonly found: FoundPlans,
    private readonly zones: readonly PlanZone[],
    private readonly cutting: (from: number, to: number, tolerance?: number) => ExactCutting,
    private readonly report: (stage: string, fraction: number) => void,
  ) {}

  fewest(): number {
    return Math.min(Infinity, ...this.plans.map((plan) => plan.bodies.length));
  }

  /** Keeps the plan when it can be made to fit and to keep the zones. */
  consider(tree: PlaneTree, tolerance?: number): void {
    const { spaces, seed, context } = this.input;
    const { judging, weights } = this.found;
    const at = 0.65 + 0.3 * (1 - 1 / (1 + this.plans.length / 3));
    const cutting = this.cutting(at, at + 0.04, tolerance);
    const search = {
      weights,
      seed,
      judging,
      zones: this.zones,
      onStep: () => context.throwIfCancelled(),
    };
    const exact = repairPlan(cutExactly(tree, cutting), cutting, search);
    if (!exact) return;
    const figures = measurePlan(exact.tree, exact.bodies, exact.offsets, {
      spaces,
      ...judging,
      onStep: () => this.report('Judging the pieces', at + 0.05),
    });
    this.plans.push({ ...exact, figures });
  }
}

function explained(plan: MeasuredPlan, { spaces }: PlanInput, { mirrors }: FoundPlans): CutTree {
  const { tree, bodies, offsets, figures } = plan;
  return explainTree({ tree, bodies, offsets, cuts: figures.cuts, spaces, mirrors });
}

/** The given tree with the offsets that were really used. */
function withSameReasons(tree: CutTree, offsets: readonly number[]): CutTree {
  let next = 0;
  const visit = (node: CutTree): CutTree => {
    if (node.kind === 'leaf') return node;
    const offset = offsets[next++];
    const above = visit(node.above);
    return { ...node, plane: { ...node.plane, offset }, above, below: visit(node.below) };
  };
  return visit(tree);
}

/** The best grid of any of the spaces. */
function bestGrid(
  mesh: TriangleMesh,
  spaces: readonly BuildSpace[],
  toleranceMm: number,
  onStep: () => void,
): BestGrid {
  return spaces
    .map((space) => bestExactGrid(mesh, gridCell(space), toleranceMm, onStep))
    .reduce((a, b) => (b.pieces < a.pieces ? b : a));
}

function wholeModel(uncut: ExactPlan, input: PlanInput, startMs: number): PlanChoice {
  const { spaces, wishes, context } = input;
  const pieces = uncut.bodies.length;
  const figures = measurePlan(uncut.tree, uncut.bodies, [], {
    spaces,
    worth: { ofTriangle: new Float32Array(0), at: () => 1, creases: [] },
    overhangDegrees: wishes.overhangDegrees,
    onStep: () => context.throwIfCancelled(),
  });
  const tree: CutTree = { kind: 'leaf' };
  const bounds = { pieces, reason: uncutWords(pieces, spaces), gap: '', gridPieces: pieces };
  return {
    tree,
    bodies: uncut.bodies,
    figures,
    offers: [{ bestAt: [], objectives: figures.objectives, tree }],
    chosenOffer: 0,
    bounds,
    searchMs: performance.now() - startMs,
    cutMs: 0,
    firstPlanMs: 0,
  };
}

function boundsOf({ pieces, reason }: PieceBound, made: number, gridPieces: number) {
  return { pieces, reason, gap: gapInWords(made, pieces), gridPieces };
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

function uncutWords(bodies: number, spaces: readonly BuildSpace[]): string {
  const space = spacesInWords(spaces);
  return bodies === 1
    ? `1 piece: the model fits ${space} whole and is not cut.`
    : `${bodies} pieces: the model's ${bodies} loose solids each fit ${space} and none is cut.`;
}

function spacesInWords(spaces: readonly BuildSpace[]): string {
  return spaces.map(spaceInWords).join(' or ');
}

function refuseOver(pieces: number, spaces: readonly BuildSpace[]): void {
  if (pieces <= MOST_PIECES) return;
  throw new JobRefusal(
    `This model would need about ${pieces} pieces in ${spacesInWords(spaces)}; at most ${MOST_PIECES} are planned. Choose a larger envelope or make the model smaller.`,
  );
}
