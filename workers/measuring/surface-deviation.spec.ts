import { describe, expect, it } from 'vitest';
import { box, sphere } from '../../test/support/shapes.js';
import { scaleMesh } from '../../shared/geometry/mesh/measure.js';
import { buildBvh } from './triangle-bvh.js';
import { surfaceDeviation } from './surface-deviation.js';
import { sampleSurface } from './surface-samples.js';

describe('the distance between two surfaces', () => {
  it('is the difference of the radii for two balls about one centre, and 0 for the same one', () => {
    const inner = sphere(40, 96, 48).mesh;
    const outer = scaleMesh(inner, 1.05);
    const found = surfaceDeviation(outer, buildBvh(inner))!;
    // The facets lie up to the sagitta inside of the ball.
    expect(found.max).toBeCloseTo(2, 1);
    expect(found.mean).toBeGreaterThan(1.97);
    expect(found.mean).toBeLessThanOrEqual(found.p95);
    expect(found.p95).toBeLessThanOrEqual(found.max);
    expect(surfaceDeviation(inner, buildBvh(inner))!.max).toBeLessThan(1e-9);
  });

  it('is one-sided', () => {
    const small = box([0, 0, 0], [10, 10, 10]).mesh;
    const large = box([0, 0, 0], [10, 10, 30]).mesh;
    expect(surfaceDeviation(small, buildBvh(large), 500)!.mean).toBeLessThan(
      surfaceDeviation(large, buildBvh(small), 500)!.mean,
    );
  });

  it('does not exist for a surface without area', () => {
    const flat = { positions: new Float64Array(9), indices: Uint32Array.of(0, 1, 2) };
    expect(surfaceDeviation(flat, buildBvh(box([0, 0, 0], [1, 1, 1]).mesh))).toBeNull();
  });
});

describe('sampling a surface', () => {
  it('spreads points by area', () => {
    const mesh = box([0, 0, 0], [100, 10, 1]).mesh;
    const { triangles, count } = sampleSurface(mesh, 10_000);
    const perTriangle = new Map<number, number>();
    for (const triangle of triangles)
      perTriangle.set(triangle, (perTriangle.get(triangle) ?? 0) + 1);
    const largest = Math.max(...perTriangle.values());
    // Half of a 100 × 10 side of 2 220 altogether.
    expect(largest / count).toBeCloseTo(500 / 2220, 3);
  });
});
