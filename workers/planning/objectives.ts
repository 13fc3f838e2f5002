/**
 * What the search wants, as separate pure functions, all in the unit "pieces": a whole piece
 * saved outweighs all the rest, which only ranks cuts of equal piece count. Weights are common
 * practice, no source.
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
  /** Area that hangs over when both sides stand on the new faces. */
  readonly overhangMm2: number;
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

/** Long or wide seams show and take glue. */
export function seamCost(cut: CutFigures): number {
  return Math.min(1, cut.seamMm2 / cut.faceMm2);
}

export function overhangCost(cut: CutFigures): number {
  return cut.surfaceMm2 > 0 ? Math.min(1, cut.overhangMm2 / cut.surfaceMm2) : 0;
}

/** Sides thinner than this are fragile and hard to glue, mm. */
const SLIVER_MM = 12;

export function sliverCost(cut: CutFigures): number {
  return cut.thinMm >= SLIVER_MM ? 0 : 1 - cut.thinMm / SLIVER_MM;
}

export function balanceCost(cut: CutFigures): number {
  const total = cut.volumeAboveMm3 + cut.volumeBelowMm3;
  return total > 0 ? Math.abs(cut.volumeAboveMm3 - cut.volumeBelowMm3) / total : 0;
}

export interface CutWeights {
  readonly seam: number;
  readonly overhang: number;
  readonly sliver: number;
  readonly balance: number;
}

export const defaultWeights: CutWeights = { seam: 0.2, overhang: 0.2, sliver: 0.6, balance: 0.05 };

/** Everything but the number of pieces, in pieces. */
export function qualityCost(cut: CutFigures, weights: CutWeights): number {
  return (
    weights.seam * seamCost(cut) +
    weights.overhang * overhangCost(cut) +
    weights.sliver * sliverCost(cut) +
    weights.balance * balanceCost(cut)
  );
}
