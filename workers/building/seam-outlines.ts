import { fromPlane, type SeamPlane } from '../../shared/geometry/sections/seam-plane.js';

/**
 * Line pairs (flat xyz of both ends, mm) along closed contours given in plane coordinates. Contours
 * that enclose less than `leastMm2` are crumbs of the overlap's rounding and are left
 * out, unless there is nothing else.
 */
export function outlinePairs(
  contours: readonly (readonly (readonly [number, number])[])[],
  plane: SeamPlane,
  leastMm2: number,
): Float32Array {
  const large = contours.filter((contour) => Math.abs(enclosed(contour)) >= leastMm2);
  const shown = large.length > 0 ? large : contours;
  const pairs = new Float32Array(6 * shown.reduce((sum, contour) => sum + contour.length, 0));
  let at = 0;
  for (const contour of shown) {
    let from = contour[contour.length - 1];
    for (const to of contour) {
      pairs.set(fromPlane(plane, from[0], from[1]), at);
      pairs.set(fromPlane(plane, to[0], to[1]), at + 3);
      at += 6;
      from = to;
    }
  }
  return pairs;
}

/** Signed area by the shoelace formula. */
function enclosed(contour: readonly (readonly [number, number])[]): number {
  let doubled = 0;
  let previous = contour[contour.length - 1];
  for (const point of contour) {
    doubled += previous[0] * point[1] - previous[1] * point[0];
    previous = point;
  }
  return doubled / 2;
}
