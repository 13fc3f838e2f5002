import { type CrossSection, type SolidScope } from '../solids/solid-kernel.js';
import { type PlanePoint } from './outlines.js';

/** Places that are compared for the pins of one seam. */
const MOST_PLACES = 64;
/** Rings of places from the edge inward. */
const RINGS = 4;

/** The smallest distance inside a region's edge at which nothing is left of it, mm. */
export function halfWidth(scope: SolidScope, region: CrossSection): number {
  if (region.isEmpty()) return 0;
  const { min, max } = region.bounds();
  let low = 0;
  let high = Math.min(max[0] - min[0], max[1] - min[1]) / 2;
  for (let step = 0; step < 14 && high - low > 0.03; step++) {
    const middle = (low + high) / 2;
    if (scope.keep(region.offset(-middle, 'Miter', 2)).isEmpty()) high = middle;
    else low = middle;
  }
  return low;
}

/**
 * Places in a region that keep a distance from its edge, spread over rings of growing distance:
 * first the points farthest from all before. Deterministic. Empty when the region is nowhere so
 * wide.
 * @param stepMm distance of places along a ring
 */
export function placesInside(
  scope: SolidScope,
  region: CrossSection,
  fromEdgeMm: number,
  stepMm: number,
): PlanePoint[] {
  const found: PlanePoint[] = [];
  for (let ring = 0; ring < RINGS; ring++) {
    const inset = scope.keep(region.offset(-(fromEdgeMm + ring * ring * stepMm), 'Round', 2, 24));
    if (inset.isEmpty()) break;
    for (const polygon of inset.toPolygons()) found.push(...walk(polygon, stepMm));
  }
  return spreadOut(found, MOST_PLACES);
}

function walk(polygon: readonly (readonly [number, number])[], stepMm: number): PlanePoint[] {
  const length = polygon.reduce((sum, point, k) => {
    const next = polygon[(k + 1) % polygon.length];
    return sum + Math.hypot(next[0] - point[0], next[1] - point[1]);
  }, 0);
  const count = Math.max(1, Math.min(200, Math.round(length / stepMm)));
  const places: PlanePoint[] = [];
  let at = 0;
  let walked = 0;
  for (let k = 0; k < count; k++) {
    const wanted = (k * length) / count;
    for (;;) {
      const [x0, y0] = polygon[at % polygon.length];
      const [x1, y1] = polygon[(at + 1) % polygon.length];
      const side = Math.hypot(x1 - x0, y1 - y0);
      if (walked + side >= wanted || at >= polygon.length) {
        const share = side > 0 ? Math.min(1, (wanted - walked) / side) : 0;
        places.push({ x: x0 + share * (x1 - x0), y: y0 + share * (y1 - y0) });
        break;
      }
      walked += side;
      at++;
    }
  }
  return places;
}

/** At most so many of the points, each next the farthest from those taken. */
function spreadOut(points: readonly PlanePoint[], most: number): PlanePoint[] {
  if (points.length === 0) return [];
  const middle = {
    x: points.reduce((sum, point) => sum + point.x, 0) / points.length,
    y: points.reduce((sum, point) => sum + point.y, 0) / points.length,
  };
  const distance = points.map((point) => Math.hypot(point.x - middle.x, point.y - middle.y));
  const taken: PlanePoint[] = [];
  let next = farthest(distance);
  distance.fill(Infinity);
  while (taken.length < most && distance[next] > 1e-6) {
    const chosen = points[next];
    taken.push(chosen);
    for (const [k, point] of points.entries())
      distance[k] = Math.min(distance[k], Math.hypot(point.x - chosen.x, point.y - chosen.y));
    next = farthest(distance);
  }
  return taken;
}

function farthest(distance: readonly number[]): number {
  return distance.reduce((best, value, k) => (value > distance[best] ? k : best), 0);
}
