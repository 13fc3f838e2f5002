import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import {
  gridCell,
  shrinkSpace,
  spaceVolume,
} from '../../shared/geometry/fitting/space-measures.js';
import { type FitFrames, makeFitFrames } from './fit-frames.js';

/** Room beyond the placing tolerance of a cut and rounding to float32, mm. */
const SPARE_MM = 0.01;

/** The build space as the search sees it. */
export interface SearchSpace {
  /** The real space: the exact pieces have to fit in here. */
  readonly space: BuildSpace;
  /** What a trial part must fit in: the real space less what the proxy may be off. */
  readonly fit: BuildSpace;
  /** What new cuts aim at: a little less still, so that placing a cut cannot push a piece over. */
  readonly aim: BuildSpace;
  readonly fitFrames: FitFrames;
  readonly aimFrames: FitFrames;
  /** Width, depth and height of the cell that parts are measured in, mm. */
  readonly cell: readonly [number, number, number];
  readonly volumeMm3: number;
}

/**
 * @param deviationMm how far the proxy's surface may lie from the model's
 * @param toleranceMm how far an exact cut may move from its wanted place
 */
export function makeSearchSpace(
  space: BuildSpace,
  deviationMm: number,
  toleranceMm: number,
): SearchSpace {
  const fit = deviationMm > 0 ? shrinkSpace(space, deviationMm) : space;
  const aim = shrinkSpace(fit, 2 * toleranceMm + SPARE_MM);
  return {
    space,
    fit,
    aim,
    fitFrames: makeFitFrames(fit),
    aimFrames: makeFitFrames(aim),
    cell: gridCell(aim),
    volumeMm3: spaceVolume(space),
  };
}
