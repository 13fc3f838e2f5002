import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type PlanPart } from './plan-part.js';

/** Why a cut was chosen; the sentence is made from it and the exact figures at the end. */
export type CutMotive = 'halves' | 'takesAbove' | 'takesBelow' | 'divides' | 'separates' | 'grid';

/** A plan on the proxy: a tree of cuts whose leaves hold only bodies that fit. */
export type PlanNode =
  | {
      readonly kind: 'leaf';
      readonly part: PlanPart;
      readonly pieces: number;
      readonly cost: number;
    }
  | {
      readonly kind: 'cut';
      readonly part: PlanPart;
      readonly plane: Plane;
      readonly motive: CutMotive;
      readonly above: PlanNode;
      readonly below: PlanNode;
      readonly pieces: number;
      /** Everything but the number of pieces, summed over the cuts, in pieces. */
      readonly cost: number;
    };

export function leafOf(part: PlanPart): PlanNode {
  return { kind: 'leaf', part, pieces: part.bodies.length, cost: 0 };
}

export function cutOf(
  part: PlanPart,
  plane: Plane,
  motive: CutMotive,
  quality: number,
  above: PlanNode,
  below: PlanNode,
): PlanNode {
  return {
    kind: 'cut',
    part,
    plane,
    motive,
    above,
    below,
    pieces: above.pieces + below.pieces,
    cost: quality + above.cost + below.cost,
  };
}

/** Costs this close are equal: the earlier plan stays. */
const COST_TIE = 1e-9;

/** Whether plan a is better: fewer pieces, then less cost. */
export function isBetter(
  a: { readonly pieces: number; readonly cost: number },
  b: { readonly pieces: number; readonly cost: number },
): boolean {
  return a.pieces < b.pieces || (a.pieces === b.pieces && a.cost < b.cost - COST_TIE);
}
