import { seededRandom } from '../runtime/seeded-random.js';
import { type CutCandidate, cutCandidates } from './cut-candidates.js';
import { partZones } from './judging/plan-zone.js';
import { sectionSight } from './judging/section-sight.js';
import { bendingCost, type PlanWeights } from './objectives.js';
import {
  cutOf,
  HOPELESS_PIECES,
  isBetter,
  leafOf,
  type PlanNode,
  supportCost,
} from './plan-node.js';
import {
  fitsWhole,
  type PartSplit,
  type PlanBody,
  type PlanPart,
  splitPart,
  supportOf,
} from './plan-part.js';
import { type CutMotive } from './plan-node.js';
import { type SearchSpace } from './search-space.js';
import { separatingPlane } from './separate-bodies.js';
import { rangeAlong } from './sweep-tables.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';

export interface TreeSearchOptions {
  readonly space: SearchSpace;
  readonly weights: PlanWeights;
  readonly seed: number;
  /** Called before every sweep; may throw to cancel. */
  readonly onStep: () => void;
  /**
   * Support that a space's worth of the model is expected to need, mm³. Without it a search that
   * minds support would nibble: crumbs need none, and what is left would seem to need none either.
   */
  readonly supportPerCellMm3?: number;
  /** Work after which a plan in the making is given up; it then has a hopeless leaf. */
  readonly giveUpAt?: number;
  /** Whether to stop improving and take what there is. */
  readonly isEnough?: () => boolean;
}

/** Cuts really made before the greedy search settles on one. */
const GREEDY_TRIES = 3;
/** Cuts below cuts, at most: more only shave off crumbs. */
const DEEPEST = 150;
/** How often a greedy plan that came to nothing is begun otherwise. */
const MOST_WAYS_BACK = 30;
/** A fitting side that turns out to be over is drawn back this often. */
const RETREATS = 2;

interface MadeCut {
  readonly candidate: CutCandidate;
  readonly split: PartSplit;
  /** Expected pieces of both sides plus quality. */
  readonly value: number;
}

/**
 * The search over trees of planes. Parts are independent of one another once they are cut apart,
 * so a plan of a part is its best cut plus the best plans of both sides, and everything found
 * about a part is kept with it: greedy plans, swept candidates, made cuts.
 *
 * `work` counts inner-loop steps of sweeps and cuts: budgets are in it, never in time, so that the
 * same input gives the same plan on every machine.
 */
export class TreeSearch {
  work = 0;
  private depth = 0;
  private wayBacks = 0;
  private readonly bestPlans = new WeakMap<PlanPart, PlanNode>();
  private readonly candidates = new WeakMap<PlanPart, CutCandidate[]>();
  private readonly madeCuts = new WeakMap<CutCandidate, MadeCut>();

  constructor(private readonly options: TreeSearchOptions) {}

  /** Whether no more work is to be done. */
  isOver(budget: number): boolean {
    return this.work >= budget || (this.options.isEnough?.() ?? false);
  }

  /** The best plan known of a part; at first one in which every cut is the best of a few. */
  greedy(part: PlanPart): PlanNode {
    const known = this.bestPlans.get(part);
    if (known) return known;
    this.depth++;
    const plan = this.makeGreedy(part);
    this.depth--;
    this.bestPlans.set(part, plan);
    return plan;
  }

  /** A part of which nothing more can be cut off (zones forbid it) ends in a hopeless leaf. */
  private makeGreedy(part: PlanPart): PlanNode {
    const { space, weights } = this.options;
    if (fitsWhole(part)) return leafOf(part, space, weights);
    const separated = this.separate(part, (side) => this.greedy(side));
    if (separated) return separated;
    if (this.work > (this.options.giveUpAt ?? Infinity) || this.depth > DEEPEST)
      return leafOf(part, space, weights);
    const made = this.bestCuts(part, GREEDY_TRIES);
    let plan: PlanNode = leafOf(part, space, weights);
    for (const cut of made) {
      plan = this.planOf(part, cut, (side) => this.greedy(side));
      // Zones may leave a side of which nothing can be made; another cut may do better.
      if (plan.pieces < HOPELESS_PIECES || this.wayBacks++ > MOST_WAYS_BACK) break;
    }
    return plan;
  }

  /**
   * A better plan than `plan` where one is found: at every node, from the root down, other cuts
   * are tried with greedy plans of both sides, the best of them refined in the same way.
   * @param width cuts tried at the root; fewer further down
   * @param budget work after which no more is tried
   */
  improve(plan: PlanNode, width: number, budget: number): PlanNode {
    if (plan.kind === 'leaf' || this.isOver(budget)) return plan;
    const { weights } = this.options;
    let best: PlanNode = plan;
    if (plan.motive !== 'separates' && plan.motive !== 'given') {
      for (const made of this.bestCuts(plan.part, width)) {
        if (this.isOver(budget)) break;
        const other = this.planOf(plan.part, made, (side) => this.greedy(side));
        if (isBetter(other, best, weights)) best = other;
      }
    }
    if (best.kind === 'leaf') return best;
    const above = this.improve(best.above, width, budget);
    const below = this.improve(best.below, width, budget);
    const improved = cutOf(best.part, best.plane, best.motive, best.own, above, below, weights);
    if (best.motive !== 'given') this.bestPlans.set(improved.part, improved);
    return improved;
  }

  /**
   * The plan that makes these planes first, in their order, through all that they meet, and plans
   * the rest. Null when one of them crosses a keep-whole zone.
   */
  around(part: PlanPart, planes: readonly Plane[], motive: CutMotive = 'given'): PlanNode | null {
    const [plane, ...rest] = planes;
    if (!plane) return this.greedy(part);
    const meets = part.bodies.some(({ mesh }) => {
      const [low, high] = rangeAlong(mesh.positions, plane.normal);
      return low < plane.offset && plane.offset < high;
    });
    if (!meets) return this.around(part, rest, motive);
    if (!partZones(part.zones, plane)) return null;
    const split = splitPart(part, plane, this.options.space);
    const above = this.around(split.above, rest, motive);
    const below = above && this.around(split.below, rest, motive);
    if (!above || !below) return null;
    const sightMm = sectionSight(part, plane, this.options.space);
    const own = { commonCost: 0, sightMm, bendingKpa: split.bendingKpa };
    return cutOf(part, plane, motive, own, above, below, this.options.weights);
  }

  /** The same cuts made on another part, mirrored or not: as long as every leaf fits. */
  replay(part: PlanPart, tree: PlanNode, turn: (plane: Plane) => Plane): PlanNode {
    const { space, weights } = this.options;
    if (tree.kind === 'leaf') return leafOf(part, space, weights);
    const plane = turn(tree.plane);
    const split = splitPart(part, plane, space);
    return cutOf(
      part,
      plane,
      tree.motive,
      { ...tree.own, bendingKpa: split.bendingKpa },
      this.replay(split.above, tree.above, turn),
      this.replay(split.below, tree.below, turn),
      weights,
    );
  }

  private separate(part: PlanPart, plan: (side: PlanPart) => PlanNode): PlanNode | null {
    const plane = separatingPlane(part);
    if (!plane || !partZones(part.zones, plane)) return null;
    const { above, below } = splitPart(part, plane, this.options.space);
    const free = { commonCost: 0, sightMm: 0, bendingKpa: 0 };
    return cutOf(part, plane, 'separates', free, plan(above), plan(below), this.options.weights);
  }

  private planOf(
    part: PlanPart,
    { candidate, split }: MadeCut,
    plan: (side: PlanPart) => PlanNode,
  ): PlanNode {
    const [above, below] = [plan(split.above), plan(split.below)];
    const { commonCost, sightMm } = candidate;
    const own = { commonCost, sightMm, bendingKpa: split.bendingKpa };
    return cutOf(part, candidate.plane, candidate.kind, own, above, below, this.options.weights);
  }

  /** Makes the `count` most promising cuts of a part, all different; the best first. */
  private bestCuts(part: PlanPart, count: number): MadeCut[] {
    const made: MadeCut[] = [];
    for (const candidate of diverse(this.candidatesOf(part), count)) {
      const cut = this.make(part, candidate);
      // Drawn back past the body's end it cuts nothing.
      if (cut.split.above.bodies.length > 0 && cut.split.below.bodies.length > 0) made.push(cut);
    }
    return made.sort((a, b) => a.value - b.value);
  }

  private candidatesOf(part: PlanPart): CutCandidate[] {
    const known = this.candidates.get(part);
    if (known) return known;
    const { space, weights, seed, onStep } = this.options;
    onStep();
    const body = largestPending(part);
    const random = seededRandom(seed + body.mesh.indices.length);
    const { cuts, work } = cutCandidates(part, body, space, weights, random);
    this.work += work;
    this.candidates.set(part, cuts);
    return cuts;
  }

  /** Makes a cut; a side that was to fit and does not is drawn back a little. */
  private make(part: PlanPart, candidate: CutCandidate): MadeCut {
    const known = this.madeCuts.get(candidate);
    if (known) return known;
    let used = candidate;
    let split = this.split(part, used);
    for (let k = 0; k < RETREATS && isOver(split, used.kind); k++) {
      const back = used.kind === 'takesAbove' ? candidate.stepMm / 2 : -candidate.stepMm / 2;
      const { normal, offset } = used.plane;
      const drawn = { normal, offset: offset + back };
      if (!partZones(part.zones, drawn)) break;
      used = { ...used, plane: drawn };
      split = this.split(part, used);
    }
    const value =
      this.expected(split.above) +
      this.expected(split.below) +
      used.quality +
      used.waste +
      bendingCost(split.bendingKpa, this.options.weights);
    const made = { candidate: used, split, value };
    this.madeCuts.set(candidate, made);
    return made;
  }

  private split(part: PlanPart, { plane }: CutCandidate): PartSplit {
    for (const body of part.bodies)
      this.work += STEPS_PER_CUT + STEPS_PER_CUT_INDEX * body.mesh.indices.length;
    return splitPart(part, plane, this.options.space);
  }

  /** Pieces that a part is expected to become, with the support of those bodies that fit. */
  private expected(part: PlanPart): number {
    const { space, weights } = this.options;
    let sum = 0;
    for (const body of part.bodies) {
      sum += body.cells;
      if (weights.support === 0) continue;
      if (!body.fits) {
        sum += supportCost(body.cells * (this.options.supportPerCellMm3 ?? 0), weights);
        continue;
      }
      sum += supportCost(supportOf(body, space), weights);
      this.work += STEPS_PER_SUPPORT_INDEX * body.mesh.indices.length;
    }
    return sum;
  }
}

/** Steps of a trial cut whatever the body: posing both sides. */
const STEPS_PER_CUT = 20_000;
/** Steps of a trial cut per triangle corner, its sides' extents included; measured, rough. */
const STEPS_PER_CUT_INDEX = 60;
/** The same for the support of a body in its best orientation. */
const STEPS_PER_SUPPORT_INDEX = 120;

function isOver(split: PartSplit, kind: CutCandidate['kind']): boolean {
  if (kind === 'takesAbove') return !fitsWhole(split.above) && split.above.bodies.length === 1;
  if (kind === 'takesBelow') return !fitsWhole(split.below) && split.below.bodies.length === 1;
  return false;
}

function largestPending(part: PlanPart): PlanBody {
  const pending = part.bodies.filter((body) => !body.fits);
  return pending.reduce((a, b) => (b.cells > a.cells ? b : a));
}

/** Cuts closer than this in angle and offset are the same for the beam. */
const SAME_ANGLE = 0.985;

/** The first `count` candidates of which no two are nearly the same cut. */
function diverse(candidates: readonly CutCandidate[], count: number): CutCandidate[] {
  const kept: CutCandidate[] = [];
  for (const candidate of candidates) {
    if (kept.length === count) break;
    const [x, y, z] = candidate.plane.normal;
    const isNew = kept.every(({ plane, stepMm }) => {
      const cosine = plane.normal[0] * x + plane.normal[1] * y + plane.normal[2] * z;
      if (Math.abs(cosine) < SAME_ANGLE) return true;
      const offset = cosine > 0 ? candidate.plane.offset : -candidate.plane.offset;
      return Math.abs(plane.offset - offset) > 2 * stepMm;
    });
    if (isNew) kept.push(candidate);
  }
  return kept;
}
