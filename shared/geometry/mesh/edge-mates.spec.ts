import { describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import { box, join, sevenEighthsCube, sphere, torus } from '../../../test/support/shapes.js';
import { CROWDED, groupByMates, mateEdges, nextSide } from './edge-mates.js';
import { connectedShells } from './shells.js';
import { edgeReport } from './topology.js';

describe('mating the sides of triangles', () => {
  it('counts like the edge report, on sound shapes and on 300 random soups', () => {
    const random = seededRandom(4711);
    const soups = Array.from({ length: 300 }, () => {
      const vertices = 4 + randomInteger(random, 9);
      const triangles = 1 + randomInteger(random, 20);
      const indices = new Uint32Array(3 * triangles);
      for (let i = 0; i < indices.length; i += 3) {
        const a = randomInteger(random, vertices);
        const b = (a + 1 + randomInteger(random, vertices - 1)) % vertices;
        let c = randomInteger(random, vertices);
        while (c === a || c === b) c = (c + 1) % vertices;
        indices.set([a, b, c], i);
      }
      return { indices };
    });
    const shapes = [sphere(5, 12, 6).mesh, torus(9, 3, 12, 8).mesh, sevenEighthsCube(4).mesh];
    for (const { indices } of [...soups, ...shapes]) {
      const { mates, ...counts } = mateEdges(indices);
      expect(counts).toEqual(edgeReport({ indices }));
      for (let side = 0; side < mates.length; side++) {
        if (mates[side]! < 0) continue;
        expect(mates[mates[side]!]).toBe(side);
        const ends = [indices[side], indices[nextSide(side)]].sort();
        const other = mates[side]!;
        expect([indices[other], indices[nextSide(other)]].sort()).toEqual(ends);
      }
      expect(mates.includes(CROWDED)).toBe(counts.nonManifoldEdges > 0);
    }
  });

  it('groups like the shells where no edge is crowded', () => {
    const pair = join([box([0, 0, 0], [1, 1, 1]).mesh, sphere(5, 12, 6).mesh]);
    expect(groupByMates(mateEdges(pair.indices).mates)).toEqual(connectedShells(pair));
  });
});
