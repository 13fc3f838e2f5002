import { type BuildSpace } from './build-space.js';
import { convexHull2d } from './convex-hull-2d.js';
import { minEnclosingCircle } from './min-enclosing-circle.js';
import { fitInRectangle } from './rectangle-fit.js';

export interface FootprintFit {
  /** Room left on the bed, mm: along the tighter side, or in the diameter; negative when over. */
  readonly slackMm: number;
  /** Rotation x' = cos·x − sin·y, y' = sin·x + cos·y, then the shift that centres it on the bed. */
  readonly cos: number;
  readonly sin: number;
  readonly shiftX: number;
  readonly shiftY: number;
}

/**
 * How a footprint fits the bed in its best rotation. A rectangular bed spans x in [0, width] and
 * y in [0, depth]; a round one is the disk of its diameter d centred at (d/2, d/2).
 * @param footprint flat xy, mm; any points, their hull counts; none fits with all the room
 */
export function fitFootprint(footprint: Float64Array, space: BuildSpace): FootprintFit {
  const hull = convexHull2d(footprint);
  if (space.shape === 'round') {
    const circle = minEnclosingCircle(hull);
    const middle = space.diameterMm / 2;
    return {
      slackMm: space.diameterMm - 2 * Math.max(0, circle.radius),
      cos: 1,
      sin: 0,
      shiftX: middle - circle.x,
      shiftY: middle - circle.y,
    };
  }
  const { slackMm, cos, sin } = fitInRectangle(hull, space.widthMm, space.depthMm);
  let minX = Infinity;
  let maxX = -Infinity;
  let minY = Infinity;
  let maxY = -Infinity;
  for (let k = 0; k < hull.length; k += 2) {
    const x = cos * hull[k] - sin * hull[k + 1];
    const y = sin * hull[k] + cos * hull[k + 1];
    minX = Math.min(minX, x);
    maxX = Math.max(maxX, x);
    minY = Math.min(minY, y);
    maxY = Math.max(maxY, y);
  }
  if (hull.length === 0) minX = maxX = minY = maxY = 0;
  return {
    slackMm,
    cos,
    sin,
    shiftX: (space.widthMm - (maxX - minX)) / 2 - minX,
    shiftY: (space.depthMm - (maxY - minY)) / 2 - minY,
  };
}
