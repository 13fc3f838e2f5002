import { seededRandom } from './seeded-random.js';
import { type CutCandidate, cutCandidates } from './cut-candidates.js';
import { type CutWeights } from './objectives.js';
import { cutOf, isBetter, leafOf, type PlanNode } from './plan-node.js';
import { fitsWhole, type PartSplit, type PlanBody, type PlanPart, splitPart } from './plan-part.js';
import { type SearchSpace } from './search-space.js';
import { separatingPlane } from './separate-bodies.js';

export interface TreeSearchOptions {
  readonly space: SearchSpace;
  readonly weights: CutWeights;
  readonly seed: number;
  /** Called before every sweep; may throw to cancel. */
  readonly onStep: () => void;
}

/** Cuts really made before the greedy search settles on one. */
const GREEDY_TRIES = 3;
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
  private readonly bestPlans = new WeakMap<PlanPart, PlanNode>();
  private readonly candidates = new WeakMap<PlanPart, CutCandidate[]>();
  private readonly madeCuts = new WeakMap<CutCandidate, MadeCut>();

  constructor(private readonly options: TreeSearchOptions) {}

  /** The best plan known of a part; at first one in which every cut is the best of a few. */
  greedy(part: PlanPart): PlanNode {
    const known = this.bestPlans.get(part);
    if (known) return known;
    const plan = this.makeGreedy(part);
    this.bestPlans.set(part, plan);
    return plan;
  }

  private makeGreedy(part: PlanPart): PlanNode {
    if (fitsWhole(part)) return leafOf(part);
    const separated = this.separate(part, (side) => this.greedy(side));
    if (separated) return separated;
    const made = this.bestCuts(part, GREEDY_TRIES);
    if (made.length === 0) throw new Error('A part that does not fit has no cut.');
    return this.planOf(part, made[0], (side) => this.greedy(side));
  }

  /**
   * A better plan than `plan` where one is found: at every node, from the root down, other cuts
   * are tried with greedy plans of both sides, the best of them refined in the same way.
   * @param width cuts tried at the root; fewer further down
   * @param budget work after which no more is tried
   */
  improve(plan: PlanNode, width: number, budget: number): PlanNode {
    if (plan.kind === 'leaf' || plan.pieces <= 2 || this.work >= budget) return plan;
    let best: PlanNode = plan;
    if (plan.motive !== 'separates') {
      for (const made of this.bestCuts(plan.part, width)) {
        if (this.work >= budget) break;
        const other = this.planOf(plan.part, made, (side) => this.greedy(side));
        if (isBetter(other, best)) best = other;
      }
    }
    if (best.kind === 'leaf') return best;
    const above = this.improve(best.above, width, budget);
    const below = this.improve(best.below, width, budget);
    const quality = best.cost - best.above.cost - best.below.cost;
    const improved = cutOf(best.part, best.plane, best.motive, quality, above, below);
    this.bestPlans.set(improved.part, improved);
    return improved;
  }

  private separate(part: PlanPart, plan: (side: PlanPart) => PlanNode): PlanNode | null {
    const plane = separatingPlane(part);
    if (!plane) return null;
    const { above, below } = splitPart(part, plane, 1, this.options.space);
    return cutOf(part, plane, 'separates', 0, plan(above), plan(below));
  }

  private planOf(
    part: PlanPart,
    { candidate, split }: MadeCut,
    plan: (side: PlanPart) => PlanNode,
  ): PlanNode {
    const [above, below] = [plan(split.above), plan(split.below)];
    return cutOf(part, candidate.plane, candidate.kind, candidate.quality, above, below);
  }

  /** Makes the `count` most promising cuts of a part, all different; the best first. */
  private bestCuts(part: PlanPart, count: number): MadeCut[] {
    const made: MadeCut[] = [];
    for (const candidate of diverse(this.candidatesOf(part), count)) {
      made.push(this.make(part, candidate));
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
      used = { ...used, plane: { normal, offset: offset + back } };
      split = this.split(part, used);
    }
    const value = expected(split.above) + expected(split.below) + used.quality + used.waste;
    const made = { candidate: used, split, value };
    this.madeCuts.set(candidate, made);
    return made;
  }

  private split(part: PlanPart, { plane }: CutCandidate): PartSplit {
    for (const body of part.bodies) this.work += STEPS_PER_CUT_INDEX * body.mesh.indices.length;
    return splitPart(part, plane, ++this.capTag, this.options.space);
  }
  private capTag = 0;
}

/** Steps of a trial cut per triangle corner, its sides' extents included; measured, rough. */
const STEPS_PER_CUT_INDEX = 60;

function isOver(split: PartSplit, kind: CutCandidate['kind']): boolean {
  if (kind === 'takesAbove') return !fitsWhole(split.above) && split.above.bodies.length === 1;
  if (kind === 'takesBelow') return !fitsWhole(split.below) && split.below.bodies.length === 1;
  return false;
}

function expected(part: PlanPart): number {
  return part.bodies.reduce((sum, body) => sum + body.cells, 0);
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
