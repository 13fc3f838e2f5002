import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../../test/support/random.js';
import { convexHull3d, supportPoints } from './convex-hull-3d.js';

const extent = (points: Float64Array, n: readonly number[]) => {
  let most = -Infinity;
  for (let k = 0; k < points.length; k += 3)
    most = Math.max(most, n[0] * points[k] + n[1] * points[k + 1] + n[2] * points[k + 2]);
  return most;
};

describe('convexHull3d', () => {
  const seed = 41;
  it(`holds every point and keeps every extent of random clouds (seed ${seed})`, () => {
    const random = seededRandom(seed);
    for (let n = 0; n < 40; n++) {
      // Rounded coordinates bring many coplanar and repeated points.
      const step = n % 2 ? 25 : 0;
      const points = Float64Array.from({ length: 900 }, () => {
        const value = 400 * random();
        return step ? Math.round(value / step) * step : value;
      });
      const hull = convexHull3d(points);
      const support = supportPoints(points);
      for (let d = 0; d < 50; d++) {
        const direction = [random() - 0.5, random() - 0.5, random() - 0.5];
        expect(extent(support, direction)).toBeCloseTo(extent(points, direction), 6);
      }
      expect(hull).not.toBeNull();
      if (hull) expect(hull.facets.length / 3).toBe(2 * hull.corners.length - 4);
    }
  });

  it('keeps only the eight corners of a box that is full of points', () => {
    const points: number[] = [];
    for (let x = 0; x <= 6; x++)
      for (let y = 0; y <= 6; y++) for (let z = 0; z <= 6; z++) points.push(10 * x, 20 * y, 30 * z);
    const support = supportPoints(Float64Array.from(points));
    const corners = new Set<string>();
    for (let k = 0; k < support.length; k += 3) corners.add(support.slice(k, k + 3).join());
    for (const corner of ['0,0,0', '60,120,180', '60,0,180', '0,120,0'])
      expect(corners.has(corner)).toBe(true);
    expect(corners.size).toBeLessThan(40);
  });

  it('gives no hull, and all points as support, for flat, straight and single point sets', () => {
    const flat = Float64Array.from({ length: 60 }, (_, k) => (k % 3 === 2 ? 5 : (k * 7) % 11));
    for (const points of [flat, new Float64Array(30), Float64Array.of(1, 2, 3)]) {
      expect(convexHull3d(points)).toBeNull();
      expect(supportPoints(points)).toBe(points);
    }
  });
});
