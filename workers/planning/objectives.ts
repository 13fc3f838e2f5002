import { type Preferences } from '../../shared/jobs/plan-wishes.js';

/**
 * What the search wants, as separate pure functions, all in the unit "pieces". Weights and scales
 * are common practice, no source.
 */

/** What a cut is judged by before it is made. */
export interface CutFigures {
  /** Spaces that the sides are expected to take; 1 for a side that fits. */
  readonly cellsAbove: number;
  readonly cellsBelow: number;
  /** Loose bodies of the part, other than the swept one, that the plane would cut as well. */
  readonly alsoCut: number;
  readonly seamMm2: number;
  /** Smallest face of the space, mm²: the scale of seams. */
  readonly faceMm2: number;
  /** Volume under leaning faces when both sides stand on the new faces: as much as it can be. */
  readonly supportMm3: number;
  /** Length of the seam on the surface, by exposure. */
  readonly sightMm: number;
  /** Of the section that runs inside a wall along the cut. */
  readonly wallMm2: number;
  readonly surfaceMm2: number;
  /** Extent of the thinner side across the cut, mm. */
  readonly thinMm: number;
  readonly volumeAboveMm3: number;
  readonly volumeBelowMm3: number;
  readonly surfaceAboveMm2: number;
  /** Spaces that the whole body is expected to take. */
  readonly cells: number;
}

export function expectedPieces(cut: CutFigures): number {
  return cut.cellsAbove + cut.cellsBelow + cut.alsoCut;
}

/** A side that is taken off should carry at least this share of an average piece. */
const FAIR_SHARE = 0.9;

/**
 * Room that a fitting side gives away: a whole piece for a crumb, nothing for a fair share of the
 * body's volume or surface. Without it the search would nibble, for every crumb costs only itself.
 */
export function wasteCost(cut: CutFigures): number {
  const above = cut.cellsAbove === 1;
  const below = cut.cellsBelow === 1;
  if (above === below) return 0;
  const volume = cut.volumeAboveMm3 / (cut.volumeAboveMm3 + cut.volumeBelowMm3 || 1);
  const surface = cut.surfaceMm2 > 0 ? cut.surfaceAboveMm2 / cut.surfaceMm2 : 0;
  const share = above ? Math.max(volume, surface) : Math.max(1 - volume, 1 - surface);
  return Math.max(0, 1 - (share * cut.cells) / FAIR_SHARE);
}

/** Wide seams take glue and have to be flat. */
export function seamCost(cut: CutFigures): number {
  return Math.min(1, cut.seamMm2 / cut.faceMm2);
}

/** Seams smaller than this leave no room for a joint of any kind, mm²: a 3 mm pin and its walls. */
const LEAST_SEAM_MM2 = 25;

export function smallSeamCost(cut: CutFigures): number {
  if (cut.seamMm2 <= 0) return 0;
  return Math.max(0, 1 - cut.seamMm2 / LEAST_SEAM_MM2);
}

export function sliverCost(cut: CutFigures, leastPieceMm: number): number {
  return cut.thinMm >= leastPieceMm ? 0 : 1 - cut.thinMm / leastPieceMm;
}

/** A cut along a wall leaves two sheets; a whole piece when all of the section is that. */
export function wallCost(cut: CutFigures): number {
  return cut.seamMm2 > 0 ? Math.min(1, cut.wallMm2 / cut.seamMm2) : 0;
}

/** Whether a cut is one that nobody would make who had another. */
export function isPoor(cut: CutFigures, { leastPieceMm }: PlanWeights): boolean {
  return sliverCost(cut, leastPieceMm) > 0 || smallSeamCost(cut) > 0 || wallCost(cut) > 0.5;
}

export function balanceCost(cut: CutFigures): number {
  const total = cut.volumeAboveMm3 + cut.volumeBelowMm3;
  return total > 0 ? Math.abs(cut.volumeAboveMm3 - cut.volumeBelowMm3) / total : 0;
}

/** Seam in full view that is worth a piece at weight 1, mm: a metre. */
const SIGHT_PER_PIECE_MM = 1000;

export function sightCost(sightMm: number, weights: PlanWeights): number {
  return (weights.sight * sightMm) / SIGHT_PER_PIECE_MM;
}

/** Stress at which a seam costs half of its weight, kPa: far below what epoxy holds. */
const HALF_STRESS_KPA = 200;

export function bendingCost(bendingKpa: number, weights: PlanWeights): number {
  return (weights.bending * bendingKpa) / (bendingKpa + HALF_STRESS_KPA);
}

/** How much a thing counts, in pieces. */
export interface PlanWeights {
  /** Whether a piece saved outweighs all the rest, which then only ranks plans of equal number. */
  readonly isPiecesFirst: boolean;
  /** Per 100 cm³ of support. */
  readonly support: number;
  /** Per metre of seam in full view. */
  readonly sight: number;
  /** Of a seam under great stress. */
  readonly bending: number;
  readonly seam: number;
  readonly smallSeam: number;
  readonly sliver: number;
  readonly wall: number;
  readonly balance: number;
  readonly leastPieceMm: number;
}

/** Costs that have no slider: a plan without them is worse for everybody. */
const COMMON = { seam: 0.1, smallSeam: 0.5, sliver: 0.6, wall: 0.8, balance: 0.05 };

/** The person's preferences as weights: squares, so that the lower half of a slider is fine-grained. */
export function weightsOf(preferences: Preferences, leastPieceMm: number): PlanWeights {
  const { fewPieces, littleSupport, hiddenSeams, sturdySeams } = preferences;
  const piece = 0.25 + 2.5 * fewPieces ** 2;
  return {
    ...COMMON,
    isPiecesFirst: fewPieces >= 1,
    support: (2 * littleSupport ** 2) / piece,
    sight: (2 * hiddenSeams ** 2) / piece,
    bending: (2 * sturdySeams ** 2) / piece,
    leastPieceMm,
  };
}

/** What makes a cut worse for everybody, in pieces. */
export function commonCost(cut: CutFigures, weights: PlanWeights): number {
  return (
    weights.seam * seamCost(cut) +
    weights.smallSeam * smallSeamCost(cut) +
    weights.sliver * sliverCost(cut, weights.leastPieceMm) +
    weights.wall * wallCost(cut) +
    weights.balance * balanceCost(cut)
  );
}
