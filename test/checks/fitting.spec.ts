import { describe, expect, it } from 'vitest';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { convexHull2d } from '../../shared/geometry/fitting/convex-hull-2d.js';
import { fitFootprint } from '../../shared/geometry/fitting/footprint.js';
import { FIT_TOLERANCE_MM, layOnBed } from '../../shared/geometry/fitting/lay-on-bed.js';
import { cubeDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { fitInRectangle } from '../../shared/geometry/fitting/rectangle-fit.js';
import { spaceDiagonal } from '../../shared/geometry/fitting/space-measures.js';
import { randomDirection, seededRandom } from '../support/random.js';

/**
 * Whether a p×q rectangle (p ≥ q) fits in an a×b one (a ≥ b). Source: W. B. Carver, Amer. Math.
 * Monthly 64 (1957), problem E1225; restated in J. E. Wetzel, "Rectangles in Rectangles",
 * Mathematics Magazine 73(3):204–211, 2000 (bibliography from memory).
 */
function carver(p: number, q: number, a: number, b: number): boolean {
  if (p <= a) return q <= b;
  return q <= b && ((a + b) / (p + q)) ** 2 + ((a - b) / (p - q)) ** 2 >= 2;
}

const rectangle = (p: number, q: number, turn: number) => {
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  const corners = [0, 0, p, 0, p, q, 0, q];
  return Float64Array.from({ length: 8 }, (_, k) =>
    k % 2 === 0 ? c * corners[k] - s * corners[k + 1] : s * corners[k - 1] + c * corners[k],
  );
};

const boxCorners = (x: number, y: number, z: number) =>
  Float64Array.from({ length: 24 }, (_, k) => {
    const corner = Math.floor(k / 3);
    return [corner & 1 ? x : 0, corner & 2 ? y : 0, corner & 4 ? z : 0][k % 3];
  });

describe('rectangles in rectangles against Carver’s condition', () => {
  const seed = 20000;
  it(`agrees on 1,000 random pairs, 400 of them close to the limit (seed ${seed})`, () => {
    const random = seededRandom(seed);
    let fitted = 0;
    let tilted = 0;
    for (let n = 0; n < 1000; n++) {
      const a = 100 + 200 * random();
      const b = a * (0.2 + 0.8 * random());
      let p = a * (0.5 + 0.7 * random());
      let q = Math.min(p, b * 1.1 * random());
      if (n < 400) {
        // Put p just inside or outside of the longest that still fits with this q.
        q = 0.05 * b + 0.4 * b * random();
        let low = a;
        let high = Math.hypot(a, b);
        for (let k = 0; k < 60; k++) {
          const middle = (low + high) / 2;
          if (carver(middle, q, a, b)) low = middle;
          else high = middle;
        }
        p = low + (random() - 0.5) * 0.02;
      }
      if (q > p) [p, q] = [q, p];
      const { slackMm } = fitInRectangle(convexHull2d(rectangle(p, q, 7 * random())), a, b);
      // Nearer to the limit than rounding, either answer is right.
      if (Math.abs(slackMm) < 1e-9) continue;
      expect(slackMm > 0, `${p}×${q} in ${a}×${b}, slack ${slackMm}`).toBe(carver(p, q, a, b));
      if (slackMm > 0) fitted++;
      if (slackMm > 0 && p > a) tilted++;
    }
    expect(fitted).toBeGreaterThan(300);
    expect(fitted).toBeLessThan(900);
    expect(tilted).toBeGreaterThan(100);
  });

  it('finds at least the room of a fine scan of rotations, and never more than exists', () => {
    const random = seededRandom(7);
    for (let n = 0; n < 60; n++) {
      const points = Float64Array.from({ length: 16 }, () => 100 * random());
      const hull = convexHull2d(points);
      const [a, b] = [60 + 60 * random(), 60 + 60 * random()];
      const { slackMm, cos, sin } = fitInRectangle(hull, a, b);
      let scanned = -Infinity;
      const roomAt = (c: number, s: number) => {
        const xs: number[] = [];
        const ys: number[] = [];
        for (let k = 0; k < points.length; k += 2) {
          xs.push(c * points[k] - s * points[k + 1]);
          ys.push(s * points[k] + c * points[k + 1]);
        }
        const extent = (v: number[]) => Math.max(...v) - Math.min(...v);
        return Math.min(a - extent(xs), b - extent(ys));
      };
      for (let k = 0; k < 1800; k++) {
        const turn = (Math.PI * k) / 1800;
        scanned = Math.max(scanned, roomAt(Math.cos(turn), Math.sin(turn)));
      }
      expect(slackMm).toBeGreaterThanOrEqual(scanned - 1e-9);
      expect(roomAt(cos, sin)).toBeCloseTo(slackMm, 9);
      // A scan in steps of 0.1° misses at most the step times the polygon's reach.
      expect(slackMm - scanned).toBeLessThan((Math.PI / 1800) * 142);
    }
  });
});

describe('round beds against brute force', () => {
  const seed = 11;
  it(`finds the smallest circle of 1,000 random footprints (seed ${seed})`, () => {
    const random = seededRandom(seed);
    for (let n = 0; n < 1000; n++) {
      const count = 3 + Math.floor(6 * random());
      const points = Float64Array.from({ length: 2 * count }, () => 200 * random());
      const smallest = smallestCircleRadius(points);
      const space: BuildSpace = { shape: 'round', diameterMm: 180, heightMm: 100 };
      const { slackMm, shiftX, shiftY } = fitFootprint(points, space);
      expect(slackMm).toBeCloseTo(180 - 2 * smallest, 7);
      for (let k = 0; k < points.length; k += 2)
        expect(Math.hypot(points[k] + shiftX - 90, points[k + 1] + shiftY - 90)).toBeLessThan(
          smallest + 1e-7,
        );
    }
  });

  /** Every circle over two points and through three, the smallest that holds all. */
  function smallestCircleRadius(p: Float64Array): number {
    const count = p.length / 2;
    let best = Infinity;
    const tryCircle = (x: number, y: number, radius: number) => {
      if (radius >= best) return;
      for (let k = 0; k < count; k++)
        if (Math.hypot(p[2 * k] - x, p[2 * k + 1] - y) > radius + 1e-9) return;
      best = radius;
    };
    for (let i = 0; i < count; i++)
      for (let j = 0; j < i; j++) {
        const [ax, ay, bx, by] = [p[2 * i], p[2 * i + 1], p[2 * j], p[2 * j + 1]];
        tryCircle((ax + bx) / 2, (ay + by) / 2, Math.hypot(ax - bx, ay - by) / 2);
        for (let k = 0; k < j; k++) {
          const [cx, cy] = [p[2 * k], p[2 * k + 1]];
          const d = 2 * (ax * (by - cy) + bx * (cy - ay) + cx * (ay - by));
          if (d === 0) continue;
          const [aa, bb, cc] = [ax * ax + ay * ay, bx * bx + by * by, cx * cx + cy * cy];
          const x = (aa * (by - cy) + bb * (cy - ay) + cc * (ay - by)) / d;
          const y = (aa * (cx - bx) + bb * (ax - cx) + cc * (bx - ax)) / d;
          tryCircle(x, y, Math.hypot(ax - x, ay - y));
        }
      }
    return best;
  }
});

describe('boxes and rods in the build space', () => {
  const space: BuildSpace = { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 };

  it('takes a box of exactly the space’s size in any of its six stances', () => {
    for (const [x, y, z] of [
      [220, 220, 250],
      [250, 220, 220],
      [220, 250, 220],
    ] as const) {
      const pose = layOnBed(boxCorners(x, y, z), space, cubeDirections);
      expect(pose.fits).toBe(true);
      expect(pose.slackMm).toBe(0);
    }
  });

  it(`refuses the box once it is over by more than the tolerance of ${FIT_TOLERANCE_MM} mm`, () => {
    expect(
      layOnBed(boxCorners(220 + 0.9 * FIT_TOLERANCE_MM, 220, 250), space, cubeDirections).fits,
    ).toBe(true);
    expect(
      layOnBed(boxCorners(220 + 2 * FIT_TOLERANCE_MM, 220, 250), space, cubeDirections).fits,
    ).toBe(false);
    expect(layOnBed(boxCorners(220.2, 220, 250), space, cubeDirections).fits).toBe(false);
  });

  it('takes a disk of exactly the round bed’s size after its coordinates went through float32', () => {
    const bed: BuildSpace = { shape: 'round', diameterMm: 200, heightMm: 300 };
    const sides = 96;
    const rim = Array.from({ length: 2 * sides }, (_, k) => {
      const angle = (2 * Math.PI * (k % sides)) / sides;
      return [100 * Math.cos(angle), 100 * Math.sin(angle), k < sides ? 0 : 300];
    });
    // Away from the origin single precision is coarser: 3e-5 mm at 300 mm.
    const points = Float64Array.from(rim.flat(), (value, i) =>
      Math.fround(value + (i % 3 < 2 ? 300 : 0)),
    );
    expect(layOnBed(points, bed, cubeDirections).fits).toBe(true);
  });

  it('lays a thin rod along the space diagonal of 399.1 mm and no longer one', () => {
    // Computed: √(220² + 220² + 250²) = √159 300.
    expect(spaceDiagonal(space)).toBeCloseTo(399.12, 2);
    for (const direction of cubeDirections) {
      const rod = (length: number) => Float64Array.of(0, 0, 0, ...direction.map((c) => c * length));
      expect(layOnBed(rod(399.12), space, []).fits).toBe(true);
      expect(layOnBed(rod(399.13), space, []).fits).toBe(false);
    }
  });

  const rodSeed = 5;
  it(`takes 1,000 thin rods up to the diagonal, however they lie, and none that is longer (seed ${rodSeed})`, () => {
    const random = seededRandom(rodSeed);
    let fitted = 0;
    for (let n = 0; n < 1000; n++) {
      const side = () => 60 + 300 * random();
      const space: BuildSpace =
        n % 3 === 0
          ? { shape: 'round', diameterMm: side(), heightMm: side() }
          : { shape: 'rectangular', widthMm: side(), depthMm: side(), heightMm: side() };
      const bed =
        space.shape === 'round' ? space.diameterMm : Math.hypot(space.widthMm, space.depthMm);
      const longest = Math.hypot(bed, space.heightMm);
      // Half of them within 0.01 mm of the limit, on either side.
      const length =
        n % 2 === 0 ? longest + 0.02 * (random() - 0.5) : longest * (0.5 + 0.7 * random());
      const [x, y, z] = randomDirection(random).map((part) => part * length) as [
        number,
        number,
        number,
      ];
      const from = [50 * random(), 50 * random(), 50 * random()];
      const rod = Float64Array.from([...from, from[0]! + x, from[1]! + y, from[2]! + z]);
      if (Math.abs(length - longest) < 1e-4) continue;
      const pose = layOnBed(rod, space, cubeDirections);
      expect(pose.fits, `${length} in ${JSON.stringify(space)}`).toBe(length < longest);
      if (pose.fits) fitted++;
    }
    expect(fitted).toBeGreaterThan(350);
    expect(fitted).toBeLessThan(850);
  });

  it('moves every point of what fits into the space', () => {
    const random = seededRandom(3);
    for (let n = 0; n < 200; n++) {
      const points = Float64Array.from({ length: 60 }, () => 230 * random());
      const pose = layOnBed(points, space, cubeDirections);
      const m = pose.motion;
      let over = -Infinity;
      for (let k = 0; k < points.length; k += 3) {
        const at = [0, 4, 8].map(
          (r) => m[r] * points[k] + m[r + 1] * points[k + 1] + m[r + 2] * points[k + 2] + m[r + 3],
        );
        over = Math.max(over, -at[0], -at[1], -at[2], at[0] - 220, at[1] - 220, at[2] - 250);
      }
      expect(over <= 1e-6).toBe(pose.fits);
    }
  });
});
