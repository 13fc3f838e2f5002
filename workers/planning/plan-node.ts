import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { bendingCost, type PlanWeights, sightCost } from './objectives.js';
import { type PlanPart, supportOf } from './plan-part.js';
import { type SearchSpace } from './search-space.js';

/** Why a cut was chosen; the sentence is made from it and the exact figures at the end. */
export type CutMotive =
  'halves' | 'takesAbove' | 'takesBelow' | 'divides' | 'separates' | 'grid' | 'mirror' | 'given';

/** What a plan amounts to, everything but its cost summed over leaves and cuts. */
export interface PlanFigures {
  readonly pieces: number;
  /** All that matters beside the number of pieces, in pieces. */
  readonly cost: number;
  readonly supportMm3: number;
  readonly sightMm: number;
  /** Of the most strained seam. */
  readonly bendingKpa: number;
}

interface CutNode extends PlanFigures {
  readonly kind: 'cut';
  readonly part: PlanPart;
  readonly plane: Plane;
  readonly motive: CutMotive;
  /** Of this cut alone. */
  readonly own: CutShare;
  readonly above: PlanNode;
  readonly below: PlanNode;
}

interface LeafNode extends PlanFigures {
  readonly kind: 'leaf';
  readonly part: PlanPart;
}

/** A plan on the proxy: a tree of cuts whose leaves hold only bodies that fit. */
export type PlanNode = LeafNode | CutNode;

/** What one cut adds. */
export interface CutShare {
  /** What makes it worse for everybody, in pieces. */
  readonly commonCost: number;
  readonly sightMm: number;
  readonly bendingKpa: number;
}

/** A leaf counts a piece for every body; one that cannot be cut further counts as hopeless. */
export const HOPELESS_PIECES = 1e6;

/** Support that is worth a piece at weight 1, mm³: 100 cm³. Common practice, no source. */
export const SUPPORT_PER_PIECE_MM3 = 1e5;

export function leafOf(part: PlanPart, space: SearchSpace, weights: PlanWeights): PlanNode {
  let supportMm3 = 0;
  for (const body of part.bodies) if (body.fits) supportMm3 += supportOf(body, space);
  const isHopeless = part.bodies.some((body) => !body.fits);
  return {
    kind: 'leaf',
    part,
    pieces: isHopeless ? HOPELESS_PIECES : part.bodies.length,
    cost: supportCost(supportMm3, weights),
    supportMm3,
    sightMm: 0,
    bendingKpa: 0,
  };
}

export function supportCost(supportMm3: number, weights: PlanWeights): number {
  return (weights.support * supportMm3) / SUPPORT_PER_PIECE_MM3;
}

export function cutOf(
  part: PlanPart,
  plane: Plane,
  motive: CutMotive,
  own: CutShare,
  above: PlanNode,
  below: PlanNode,
  weights: PlanWeights,
): CutNode {
  const ownCost =
    own.commonCost + sightCost(own.sightMm, weights) + bendingCost(own.bendingKpa, weights);
  return {
    kind: 'cut',
    part,
    plane,
    motive,
    own,
    above,
    below,
    pieces: above.pieces + below.pieces,
    cost: ownCost + above.cost + below.cost,
    supportMm3: above.supportMm3 + below.supportMm3,
    sightMm: own.sightMm + above.sightMm + below.sightMm,
    bendingKpa: Math.max(own.bendingKpa, above.bendingKpa, below.bendingKpa),
  };
}

/** The same plan by other weights. */
export function recost(plan: PlanNode, weights: PlanWeights): PlanNode {
  if (plan.kind === 'leaf') return { ...plan, cost: supportCost(plan.supportMm3, weights) };
  const { part, plane, motive, own } = plan;
  const above = recost(plan.above, weights);
  return cutOf(part, plane, motive, own, above, recost(plan.below, weights), weights);
}

/** Costs this close are equal: the earlier plan stays. */
const COST_TIE = 1e-9;

/** Whether plan a is better: fewer pieces first when that is what counts, else by what it costs. */
export function isBetter(
  a: { readonly pieces: number; readonly cost: number },
  b: { readonly pieces: number; readonly cost: number },
  { isPiecesFirst }: PlanWeights,
): boolean {
  if (isPiecesFirst)
    return a.pieces < b.pieces || (a.pieces === b.pieces && a.cost < b.cost - COST_TIE);
  return a.pieces + a.cost < b.pieces + b.cost - COST_TIE;
}
