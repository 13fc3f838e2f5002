import { describe, expect, it } from 'vitest';
import { loopArea } from '../../shared/geometry/cutting/section-cap.js';
import { pinShape, socketShape } from './outlines.js';

const points = (loop: Float64Array) =>
  Array.from({ length: loop.length / 2 }, (_, k) => ({ x: loop[2 * k]!, y: loop[2 * k + 1]! }));

/** Distance of the origin from the line of each side, the least of them. */
function inscribed(loop: Float64Array, x = 0, y = 0): number {
  const all = points(loop);
  return Math.min(
    ...all.map((a, k) => {
      const b = all[(k + 1) % all.length]!;
      return ((a.x - x) * (b.y - y) - (b.x - x) * (a.y - y)) / Math.hypot(b.x - a.x, b.y - a.y);
    }),
  );
}

describe('socketShape', () => {
  it('lets a circle of the radius just through', () => {
    const loop = socketShape({ x: 3, y: -2 })(2.5);
    expect(inscribed(loop, 3, -2)).toBeCloseTo(2.5, 9);
    expect(loopArea(loop)).toBeGreaterThan(Math.PI * 2.5 ** 2);
    expect(loopArea(loop)).toBeLessThan(1.01 * Math.PI * 2.5 ** 2);
  });

  it('lets the pin move along its reach and nowhere else', () => {
    const loop = socketShape({ x: 0, y: 0 }, { x: 1.2, y: 0.9 })(2);
    for (const way of [-1, 0, 1]) {
      expect(inscribed(loop, way * 1.2, way * 0.9)).toBeGreaterThanOrEqual(2 - 1e-9);
      expect(inscribed(loop, way * 1.2, way * 0.9)).toBeLessThan(2.02);
    }
    // A stadium: disc and rectangle.
    expect(loopArea(loop) / (Math.PI * 4 + 4 * 3)).toBeCloseTo(1, 2);
  });

  it('closes its top by sides no flatter than 45° and a bridge of 0.83 radii', () => {
    for (const reach of [
      { x: 0, y: 0 },
      { x: 1, y: 0 },
      { x: 0, y: 1 },
    ]) {
      const all = points(socketShape({ x: 0, y: 0 }, reach, { x: 0, y: 1 })(3));
      const top = Math.max(...all.map((point) => point.y));
      let bridged = 0;
      for (const [k, a] of all.entries()) {
        const b = all[(k + 1) % all.length]!;
        if (Math.max(a.y, b.y) <= 0 || Math.abs(a.y - b.y) > 1e-9) {
          const isCeiling = b.x < a.x;
          if (isCeiling) expect(Math.abs(b.y - a.y)).toBeGreaterThanOrEqual(0.999 * (a.x - b.x));
          continue;
        }
        expect(a.y).toBeCloseTo(top, 9);
        bridged += a.x - b.x;
      }
      expect(bridged).toBeGreaterThan(0.8 * 3);
      expect(bridged).toBeLessThan(0.85 * 3 + 2 * reach.x);
    }
  });

  it('gives the same corners for every radius', () => {
    const shape = socketShape({ x: 5, y: 5 }, { x: 0.3, y: -1 }, { x: 0.6, y: 0.8 });
    const [small, large] = [shape(1), shape(4)];
    expect(large.length).toBe(small.length);
    expect(loopArea(small)).toBeGreaterThan(0);
    expect(loopArea(large)).toBeGreaterThan(loopArea(small));
  });
});

describe('pinShape', () => {
  it('stays inside its circle', () => {
    const all = points(pinShape({ x: 1, y: 1 })(4));
    for (const { x, y } of all) expect(Math.hypot(x - 1, y - 1)).toBeLessThanOrEqual(4 + 1e-9);
  });
});
