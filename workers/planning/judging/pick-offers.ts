import { type Objectives } from '../../../shared/jobs/plan-make.js';
import { type MeasuredPlan } from '../choose-plan.js';
import { bendingCost, type PlanWeights, sightCost } from '../objectives.js';
import { isBetter, type PlanFigures, type PlanNode, supportCost } from '../plan-node.js';

/** Differences below this share are none: planning figures are no more exact. */
const SAME_SHARE = 0.01;
/** Plans that are cut exactly, fewer of a model so heavy that each takes a second. */
const MOST_CANDIDATES = 9;
const MOST_HEAVY = 5;
const HEAVY_TRIANGLES = 500_000;
/** Plans that are offered. */
const MOST_OFFERS = 7;

type Measure = readonly [pieces: number, support: number, sight: number, bending: number];

const trialMeasure = (plan: PlanFigures): Measure => [
  plan.pieces,
  plan.supportMm3,
  plan.sightMm,
  plan.bendingKpa,
];

const exactMeasure = (objectives: Objectives): Measure => [
  objectives.pieces,
  objectives.supportMm3,
  objectives.visibleSeamMm,
  objectives.weakestSeamKpa,
];

/** Whether a is better than b in something and worse in nothing. */
export function dominates(a: Measure, b: Measure): boolean {
  let isBetterOnce = false;
  for (let k = 0; k < a.length; k++) {
    if (a[k] > b[k] + SAME_SHARE * Math.abs(b[k])) return false;
    if (a[k] < b[k] - SAME_SHARE * Math.abs(b[k])) isBetterOnce = true;
  }
  return isBetterOnce;
}

function isSame(a: Measure, b: Measure): boolean {
  return a.every((value, k) => Math.abs(value - b[k]) <= SAME_SHARE * Math.max(value, b[k]));
}

/** The items no other one dominates, of equal ones the first. */
function undominated<T>(items: readonly T[], measure: (item: T) => Measure): T[] {
  return items.filter((item, k) => {
    const own = measure(item);
    return items.every(
      (other, j) =>
        j === k || (!dominates(measure(other), own) && !(j < k && isSame(measure(other), own))),
    );
  });
}

/**
 * The plans of a search worth cutting exactly: the first (the best by the person's weights), the
 * best in each thing, then those in between, farthest from what is taken already.
 * @param plans the best first; @param most plans of more pieces are left out, but for the first
 * @param triangles of the exact model
 */
export function pickCandidates(
  plans: readonly PlanNode[],
  most: number,
  triangles: number,
): PlanNode[] {
  const count = triangles > HEAVY_TRIANGLES ? MOST_HEAVY : MOST_CANDIDATES;
  const allowed = plans.filter((plan) => plan.pieces <= most);
  const pool = undominated(allowed.length > 0 ? allowed : plans.slice(0, 1), trialMeasure);
  const best = (allowed[0] ?? plans[0])!;
  const taken = new Set<PlanNode>([best]);
  for (let k = 0; k < 4; k++)
    taken.add(pool.reduce((a, b) => (trialMeasure(b)[k] < trialMeasure(a)[k] ? b : a)));
  // Pieces may break apart or come over when cut exactly: the runner-up in pieces goes along.
  const few = [...pool].sort((a, b) => a.pieces - b.pieces || a.cost - b.cost);
  for (const plan of few.slice(0, 2)) taken.add(plan);
  while (taken.size < Math.min(count, pool.length)) {
    const left = pool.filter((plan) => !taken.has(plan));
    if (left.length === 0) break;
    taken.add(farthest(left, [...taken]));
  }
  return [...taken].slice(0, count);
}

/** The plan that differs most from all those taken, each measure by its ratio. */
function farthest(plans: readonly PlanNode[], taken: readonly PlanNode[]): PlanNode {
  const distance = (a: PlanNode, b: PlanNode) => {
    const [one, other] = [trialMeasure(a), trialMeasure(b)];
    return one.reduce((sum, value, k) => sum + Math.abs(Math.log((value + 1) / (other[k] + 1))), 0);
  };
  const least = (plan: PlanNode) => Math.min(...taken.map((one) => distance(plan, one)));
  return plans.reduce((a, b) => (least(b) > least(a) ? b : a));
}

/** The best by the person's weights, on exact figures. */
export function bestPlan(plans: readonly MeasuredPlan[], weights: PlanWeights): MeasuredPlan {
  const worth = ({ figures: { objectives, cuts } }: MeasuredPlan) => ({
    pieces: objectives.pieces,
    cost:
      supportCost(objectives.supportMm3, weights) +
      sightCost(objectives.visibleSeamMm, weights) +
      cuts.reduce((sum, cut) => sum + bendingCost(cut.bendingKpa, weights), 0),
  });
  return plans.reduce((a, b) => (isBetter(worth(b), worth(a), weights) ? b : a));
}

const LABELS = [
  'fewest pieces',
  'least support',
  'least seam in sight',
  'sturdiest seams',
] as const;

/**
 * The plans that are offered, each with what it is best at: none is dominated by another, the
 * chosen one always is among them. By rising number of pieces, then support.
 */
export function sortOffers(
  plans: readonly MeasuredPlan[],
  chosen: MeasuredPlan,
): { plan: MeasuredPlan; bestAt: string[] }[] {
  const measure = (plan: MeasuredPlan) => exactMeasure(plan.figures.objectives);
  const front = undominated(plans, measure);
  const kept = front.includes(chosen) ? front : [...front, chosen];
  const labelled = kept.map((plan) => {
    const bestAt = LABELS.filter((_, k) =>
      kept.every((other) => measure(plan)[k] <= measure(other)[k] * (1 + SAME_SHARE)),
    ).map(String);
    if (plan === chosen) bestAt.push('nearest to what was asked');
    return { plan, bestAt };
  });
  const special = labelled.filter(({ bestAt }) => bestAt.length > 0);
  const between = labelled
    .filter(({ bestAt }) => bestAt.length === 0)
    .slice(0, Math.max(0, MOST_OFFERS - special.length))
    .map(({ plan }) => ({ plan, bestAt: ['a middle way'] }));
  return [...special, ...between].sort((a, b) => {
    const [one, other] = [measure(a.plan), measure(b.plan)];
    return one[0] - other[0] || one[1] - other[1];
  });
}
