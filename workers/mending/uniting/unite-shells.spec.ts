import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { beforeAll, describe, expect, it } from 'vitest';
import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { signedVolume } from '../../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import {
  box,
  facetedTurning,
  join,
  sphere,
  torusKnot,
  turnInsideOut,
} from '../../../test/support/shapes.js';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import { readStl } from '../../intake/stl-reader.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { loadSolids, type Solids } from '../../solids/solid-kernel.js';
import { uniteShells } from './unite-shells.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

function crossingsOf(mesh: TriangleMesh) {
  return findCrossings(mesh, buildBvh(mesh));
}

/** United; closed and without crossings. */
function unite(mesh: TriangleMesh): TriangleMesh {
  const crossingTriangles = crossingsOf(mesh).triangles;
  const united = uniteShells(mesh, { solids, crossingTriangles });
  if ('refusal' in united) throw new Error(united.refusal);
  expect(edgeReport(united.mesh).closed).toBe(true);
  expect(crossingsOf(united.mesh).pairs).toBe(0);
  return united.mesh;
}

function moved(mesh: TriangleMesh, x: number, y = 0, z = 0): TriangleMesh {
  const by = [x, y, z];
  return { ...mesh, positions: mesh.positions.map((value, i) => value + by[i % 3]) };
}

const shellsOf = (mesh: TriangleMesh) => surfacesOf(mesh).count;
const cube = (from: number, to: number) => box([from, from, from], [to, to, to]).mesh;

describe('uniting overlapping shells', () => {
  it('gives two boxes the volume of inclusion and exclusion', () => {
    const mesh = join([cube(0, 10), moved(cube(0, 10), 6, 5, 4)]);
    const united = unite(mesh);
    expect(signedVolume(united)).toBeCloseTo(2000 - 4 * 5 * 6, 3);
    expect(shellsOf(united)).toBe(1);
  });

  it('gives two balls the volume of inclusion and exclusion', () => {
    const ball = sphere(10, 128, 64);
    const united = unite(join([ball.mesh, moved(ball.mesh, 12, 0.3, 0.1)]));
    // Lens of two balls of radius r at distance d: π (4 r + d) (2 r − d)² / 12.
    const distance = Math.hypot(12, 0.3, 0.1);
    const lens = (Math.PI * (40 + distance) * (20 - distance) ** 2) / 12;
    const round = (8 / 3) * Math.PI * 1000 - lens;
    expect(signedVolume(united) / round).toBeCloseTo(1, 2);
    const exact = 2 * ball.volumeMm3 - lens;
    expect(Math.abs(signedVolume(united) - exact)).toBeLessThan(0.01 * lens);
  });

  it('gives a ball on a box the volume of inclusion and exclusion', () => {
    const ball = sphere(5, 128, 64);
    const united = unite(join([cube(0, 20), moved(ball.mesh, 10.01, 10.02, 20)]));
    // Half of the ball stands out of the top; the sphere has a ring of vertices in the top itself.
    expect(signedVolume(united)).toBeCloseTo(8000 + ball.volumeMm3 / 2, 2);
  });

  it('unites boxes whose faces lie in each other and of which no facets cross', () => {
    const mesh = join([box([0, 0, 0], [10, 10, 10]).mesh, box([5, 0, 0], [15, 10, 10]).mesh]);
    expect(signedVolume(unite(mesh))).toBeCloseTo(1500, 3);
  });

  it('agrees with manifold-3d on three bodies', () => {
    const parts = [
      cube(0, 10),
      moved(sphere(6, 48, 24).mesh, 9, 9, 9),
      moved(cube(0, 8), 7, -3, 2),
    ];
    const volume = solids.withSolids(({ Manifold, Mesh, keep }) => {
      const taken = parts.map(({ positions, indices }) =>
        keep(
          new Manifold(
            new Mesh({
              numProp: 3,
              vertProperties: Float32Array.from(positions),
              triVerts: indices,
            }),
          ),
        ),
      );
      return keep(Manifold.union(taken)).volume();
    });
    expect(signedVolume(unite(join(parts)))).toBeCloseTo(volume, 2);
  });

  it('leaves shells that share no space with others bit for bit', () => {
    const lone = moved(sphere(3, 24, 12).mesh, 12.3, 1.7, 20);
    const mesh = join([lone, cube(0, 10), moved(cube(0, 10), 5, 5, 5)]);
    const united = unite(mesh);
    expect(united.indices.subarray(0, lone.indices.length)).toEqual(lone.indices);
    expect(united.positions.subarray(0, lone.positions.length)).toEqual(lone.positions);
    // A ring through whose hole the others reach: their boxes touch, they do not.
    const ring = facetedTurning(
      'ring',
      [
        [9, -1],
        [11, -1],
        [11, 1],
        [9, 1],
      ],
      32,
    ).mesh;
    const pair = [cube(-4, 4), moved(cube(-4, 4), 1, 1, 1)];
    const both = unite(join([ring, ...pair]));
    expect(both.positions.subarray(0, ring.positions.length)).toEqual(ring.positions);
    expect(shellsOf(both)).toBe(2);
  });

  it('has nothing to do where nothing overlaps', () => {
    const mesh = join([cube(0, 10), turnInsideOut(cube(2, 8)), cube(4, 6), moved(cube(0, 3), 20)]);
    expect(uniteShells(mesh, { solids })).toEqual({ mesh, steps: [] });
  });

  it('keeps hollows, and fills them where another solid covers them', () => {
    const hollow = join([cube(0, 10), turnInsideOut(cube(2, 4))]);
    const beside = unite(join([hollow, moved(cube(0, 10), 7, 7, 7)]));
    expect(signedVolume(beside)).toBeCloseTo(2000 - 27 - 8, 3);
    expect(shellsOf(beside)).toBe(2);
    const covered = unite(join([hollow, moved(cube(0, 10), 1, 1, 1)]));
    expect(signedVolume(covered)).toBeCloseTo(2000 - 729, 3);
    expect(shellsOf(covered)).toBe(1);
    const halfCovered = unite(join([hollow, moved(cube(0, 10), 3, 1, 1)]));
    expect(signedVolume(halfCovered)).toBeCloseTo(2000 - 7 * 9 * 9 - 4, 3);
  });

  it('unites what overlaps inside a hollow without the shells around', () => {
    const around = [cube(0, 30), turnInsideOut(cube(2, 28))];
    const mesh = join([...around, cube(5, 15), cube(10, 20)]);
    const united = unite(mesh);
    expect(signedVolume(united)).toBeCloseTo(27000 - 17576 + 2000 - 125, 3);
    expect(united.positions.subarray(0, 48)).toEqual(mesh.positions.subarray(0, 48));
  });

  it('takes a hollow that breaks through its shell away from it', () => {
    const mesh = join([cube(0, 10), turnInsideOut(moved(cube(0, 4), 3, 3, 8))]);
    expect(signedVolume(unite(mesh))).toBeCloseTo(1000 - 4 * 4 * 2, 3);
  });

  it('keeps its digits far from the origin', () => {
    const mesh = join([cube(0, 10), moved(cube(0, 10), 6, 5, 4)]);
    const far = unite(moved(mesh, 1e6, -2e6, 3e6));
    expect(signedVolume(far)).toBeCloseTo(1880, 3);
  });
});

describe('uniting boxes of whole numbers', () => {
  // Faces in faces, edges on edges, corners on corners. The truth is a count of unit cubes.
  it('gives the volume of the cubes that they fill', () => {
    const random = seededRandom(7);
    for (let round = 0; round < 100; round++) {
      const boxes = Array.from({ length: 2 + randomInteger(random, 5) }, () => {
        const low = [0, 0, 0].map(() => randomInteger(random, 6)) as [number, number, number];
        const high = low.map((value) => value + 1 + randomInteger(random, 5)) as typeof low;
        return { low, high };
      });
      let filled = 0;
      for (let cell = 0; cell < 11 ** 3; cell++) {
        const at = [cell % 11, Math.floor(cell / 11) % 11, Math.floor(cell / 121)];
        const isIn = boxes.some(({ low, high }) =>
          at.every((value, axis) => value >= low[axis] && value < high[axis]),
        );
        if (isIn) filled++;
      }
      const mesh = join(boxes.map(({ low, high }) => box(low, high).mesh));
      const united = uniteShells(mesh, { solids });
      if ('refusal' in united) throw new Error(united.refusal);
      expect(Math.abs(signedVolume(united.mesh) - filled)).toBeLessThan(0.01);
      expect(edgeReport(united.mesh).closed).toBe(true);
    }
  });
});

describe('uniting a shell that crosses itself', () => {
  it('makes a fat knot one solid', () => {
    const knot = torusKnot(20, 19, 240, 24);
    expect(crossingsOf(knot).pairs).toBeGreaterThan(0);
    const united = unite(knot);
    const volume = signedVolume(united);
    expect(volume).toBeLessThan(signedVolume(knot));
    expect(volume).toBeGreaterThan(0.5 * signedVolume(knot));
  });

  it('makes a ball one solid whose one vertex comes out on the other side', () => {
    // A tube with a dent that comes out on the other side.
    const ball = sphere(10, 32, 16).mesh;
    const positions = ball.positions.slice();
    let far = 0;
    for (let i = 0; i < positions.length; i += 3) if (positions[i] > positions[far]) far = i;
    positions[far] = -14;
    const united = unite({ ...ball, positions });
    expect(edgeReport(united).closed).toBe(true);
    expect(crossingsOf(united).pairs).toBe(0);
  });
});

/** Open test meshes that lie beside the repository on some machines. */
const folder = fileURLToPath(new URL('../../../../shared/meshes/stl', import.meta.url));

describe.skipIf(!existsSync(folder))('real meshes', () => {
  it.each(['o20_bones', 'm06_box_assembly', 's20_overlapping_union_needed'])(
    'unites %s as manifold-3d unites its parts',
    (name) => {
      const { mesh } = readStl(readFileSync(`${folder}/${name}.stl`), `${name}.stl`);
      const united = unite(mesh);
      const other = solids.withSolids(({ Manifold, Mesh, keep }) => {
        const vertProperties = Float32Array.from(mesh.positions);
        const whole = new Mesh({ numProp: 3, vertProperties, triVerts: mesh.indices });
        const parts = keep(new Manifold(whole)).decompose();
        const union = keep(Manifold.union(parts.map(keep)));
        return { volume: union.volume(), parts: union.decompose().map(keep).length };
      });
      expect(signedVolume(united) / other.volume).toBeCloseTo(1, 6);
      expect(shellsOf(united)).toBe(other.parts);
    },
  );
});
