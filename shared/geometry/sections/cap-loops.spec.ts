import { describe, expect, it } from 'vitest';
import { cutMesh } from '../cutting/cut-mesh.js';
import { boxWithCavity } from '../../../test/support/shapes.js';
import { loadManifold, manifoldTriangulator } from '../../../test/support/triangulator.js';
import { capsOf } from './cap-loops.js';

describe('capsOf', () => {
  it('finds nothing on a model that was not cut', () => {
    expect(capsOf(boxWithCavity(10, 4).mesh)).toEqual([]);
  });

  it('bounds each cap by closed loops with the cap on their left, holes included', async () => {
    const triangulate = manifoldTriangulator(await loadManifold());
    const { mesh } = boxWithCavity(10, 4);
    const plane = { normal: [0, 0, 1], offset: 5.5 } as const;
    const halves = cutMesh(mesh, plane, { triangulate, capTag: 3 });
    for (const [half, sign] of [
      [halves.below, 1],
      [halves.above, -1],
    ] as const) {
      const [cap, ...more] = capsOf(half);
      expect(more).toEqual([]);
      expect(cap.cut).toBe(3);
      const areas = cap.loops.map((loop) =>
        loop.reduce((sum, vertex, i) => {
          const next = 3 * loop[(i + 1) % loop.length];
          const p = half.positions;
          return sum + (p[3 * vertex] * p[next + 1] - p[3 * vertex + 1] * p[next]) / 2;
        }, 0),
      );
      // Seen along +z the cap of the lower half is as it is; the upper one's is seen from behind.
      expect(areas.sort((a, b) => a - b).map((area) => area * sign)).toEqual(
        sign > 0 ? [-16, 100] : [100, -16],
      );
    }
  });
});
