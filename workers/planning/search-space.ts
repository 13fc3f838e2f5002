import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import {
  gridCell,
  shrinkSpace,
  spaceVolume,
} from '../../shared/geometry/fitting/space-measures.js';
import { type Cell, type FitFrames, makeFitFrames } from './fit-frames.js';
import { plainWorth, type SurfaceWorth } from './judging/surface-worth.js';

/** Room beyond the placing tolerance of a cut and rounding to float32, mm. */
const SPARE_MM = 0.01;

/** What parts are judged by beside their size. */
export interface Judging {
  readonly worth: SurfaceWorth;
  /** Faces that lean further from the vertical need support, degrees. */
  readonly overhangDegrees: number;
}

const plainJudging: Judging = { worth: plainWorth, overhangDegrees: 45 };

/** The build spaces as the search sees them; a piece may go to any. */
export interface SearchSpace extends Judging {
  /** The real spaces, the preferred first: the exact pieces have to fit in one. */
  readonly spaces: readonly BuildSpace[];
  /** What a trial part must fit in: the real spaces less what the proxy may be off. */
  readonly fits: readonly BuildSpace[];
  readonly fitFrames: FitFrames;
  /** What new cuts aim at: a little less still, so that placing a cut cannot push a piece over. */
  readonly aimFrames: FitFrames;
  readonly cells: readonly Cell[];
  /** Shortest side of all spaces, mm. */
  readonly leastSideMm: number;
  /** Of the largest space. */
  readonly volumeMm3: number;
}

/**
 * @param deviationMm how far the proxy's surface may lie from the model's
 * @param toleranceMm how far an exact cut may move from its wanted place
 */
export function makeSearchSpace(
  spaces: readonly BuildSpace[],
  deviationMm: number,
  toleranceMm: number,
  judging: Judging = plainJudging,
): SearchSpace {
  const fits = deviationMm > 0 ? spaces.map((space) => shrinkSpace(space, deviationMm)) : spaces;
  const aims = fits.map((space) => shrinkSpace(space, 2 * toleranceMm + SPARE_MM));
  const cells = aims.map(gridCell);
  return {
    ...judging,
    spaces,
    fits,
    fitFrames: makeFitFrames(fits),
    aimFrames: makeFitFrames(aims),
    cells,
    leastSideMm: Math.min(...cells.flat()),
    volumeMm3: Math.max(...spaces.map(spaceVolume)),
  };
}
