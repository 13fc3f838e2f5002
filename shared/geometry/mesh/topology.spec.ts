import { describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import * as shapes from '../../../test/support/shapes.js';
import { duplicateFacets, edgeReport } from './topology.js';

const SEED = 23;

/** The slow path: a map from undirected edges to their uses. */
function countSlowly(indices: readonly number[]) {
  const uses = new Map<string, { forward: number; backward: number }>();
  for (let i = 0; i < indices.length; i++) {
    const a = indices[i]!;
    const b = indices[i % 3 === 2 ? i - 2 : i + 1]!;
    const key = `${Math.min(a, b)},${Math.max(a, b)}`;
    const use = uses.get(key) ?? { forward: 0, backward: 0 };
    if (a < b) use.forward++;
    else use.backward++;
    uses.set(key, use);
  }
  const all = [...uses.values()];
  return {
    openEdges: all.filter((use) => use.forward + use.backward === 1).length,
    nonManifoldEdges: all.filter((use) => use.forward + use.backward > 2).length,
    misorientedEdges: all.filter(
      (use) => Math.abs(use.forward - use.backward) === 2 && use.forward * use.backward === 0,
    ).length,
  };
}

describe(`edge report, seed ${SEED}`, () => {
  it('agrees with a map of edges on random triangles', () => {
    const random = seededRandom(SEED);
    for (let round = 0; round < 100; round++) {
      const indices: number[] = [];
      while (indices.length < 3 * 30) {
        const [a, b, c] = [0, 0, 0].map(() => randomInteger(random, 9));
        if (a !== b && b !== c && c !== a) indices.push(a!, b!, c!);
      }
      const slow = countSlowly(indices);
      const report = edgeReport({ indices: Uint32Array.from(indices) });
      expect(report).toEqual({ ...slow, closed: false });
      expect(slow.nonManifoldEdges).toBeGreaterThan(0);
    }
  });

  it('finds a solid closed, and open where a triangle is missing', () => {
    const { indices } = shapes.sphere(10, 16, 8).mesh;
    expect(edgeReport({ indices })).toEqual({
      openEdges: 0,
      nonManifoldEdges: 0,
      misorientedEdges: 0,
      closed: true,
    });
    expect(edgeReport({ indices: indices.slice(3) })).toMatchObject({
      openEdges: 3,
      closed: false,
    });
  });

  it('tells a turned triangle by its three edges', () => {
    const indices = Uint32Array.from(shapes.box([0, 0, 0], [1, 1, 1]).mesh.indices);
    [indices[0], indices[1]] = [indices[1]!, indices[0]!];
    expect(edgeReport({ indices })).toMatchObject({ openEdges: 0, misorientedEdges: 3 });
  });

  it('counts every edge of a doubled solid as non-manifold', () => {
    const { indices } = shapes.box([0, 0, 0], [1, 1, 1]).mesh;
    const doubled = Uint32Array.of(...indices, ...indices);
    expect(edgeReport({ indices: doubled })).toMatchObject({ nonManifoldEdges: 18, openEdges: 0 });
    expect(duplicateFacets({ indices: doubled })).toBe(12);
    expect(duplicateFacets({ indices })).toBe(0);
  });

  it('counts repeated facets whatever their order and orientation', () => {
    const indices = Uint32Array.of(0, 1, 2, 2, 0, 1, 1, 0, 2, 0, 1, 3);
    expect(duplicateFacets({ indices })).toBe(2);
  });

  it('stays linear where thousands of triangles share a vertex', () => {
    const { mesh } = shapes.cone(40, 90, 60_000);
    const start = performance.now();
    expect(edgeReport(mesh).closed).toBe(true);
    // A search within each vertex's edges would take minutes.
    expect(performance.now() - start).toBeLessThan(5000);
  });
});
