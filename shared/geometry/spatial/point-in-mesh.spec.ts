import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../../test/support/random.js';
import * as shapes from '../../../test/support/shapes.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { windingNumber } from './point-in-mesh.js';

const SEED = 3;

function windingAt(mesh: TriangleMesh, x: number, y: number, z: number): number {
  const triangles = Uint32Array.from({ length: mesh.indices.length / 3 }, (_, i) => i);
  return windingNumber(mesh.positions, mesh.indices, triangles, 0, triangles.length, x, y, z);
}

describe(`winding number around a point, seed ${SEED}`, () => {
  it('agrees with the closed form of a cube without an octant, on its grid lines too', () => {
    const { mesh } = shapes.sevenEighthsCube(80);
    const random = seededRandom(SEED);
    const isInside = (p: readonly number[]) =>
      p.every((value) => value > 0 && value < 80) && !p.every((value) => value > 40);
    for (let round = 0; round < 2000; round++) {
      // Rays through vertices and along faces: coordinates 0, 20, 40 and 80 come up often.
      const p = [0, 1, 2].map((axis) => {
        const value =
          random() < 0.5 ? [0, 20, 40, 80][Math.floor(4 * random())]! : 100 * random() - 10;
        return axis === 0 ? 100 * random() - 10 : value;
      });
      if (p.some((value) => [0, 40, 80].includes(value))) {
        expect([0, 1]).toContain(windingAt(mesh, p[0]!, p[1]!, p[2]!));
      } else expect(windingAt(mesh, p[0]!, p[1]!, p[2]!)).toBe(isInside(p) ? 1 : 0);
    }
  });

  it('is minus one inside a body turned inside out and two where two overlap', () => {
    const { mesh } = shapes.box([0, 0, 0], [10, 10, 10]);
    const other = shapes.box([5, 5, 5], [15, 15, 15]).mesh;
    expect(windingAt(shapes.turnInsideOut(mesh), 3, 3, 3)).toBe(-1);
    expect(windingAt(shapes.join([mesh, other]), 7, 7, 7)).toBe(2);
    expect(windingAt(shapes.join([mesh, other]), 3, 3, 3)).toBe(1);
  });
});
