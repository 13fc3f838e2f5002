import { beforeAll, describe, expect, it } from 'vitest';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { surfacesOf } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import {
  box,
  boxWithCavity,
  extrude,
  join,
  sevenEighthsCube,
  sphere,
  torus,
  torusKnot,
  turnInsideOut,
  voxels,
} from '../../test/support/shapes.js';
import { randomDirection, seededRandom } from '../../test/support/random.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { findCrossings } from './find-crossings.js';
import { findFlats } from './flat-areas.js';
import { measureSolid } from './measure-solid.js';
import { surveySurface } from './surface-state.js';
import { buildBvh } from './triangle-bvh.js';
import { measureWalls, wallsAt } from './wall-thickness.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

function measure(mesh: TriangleMesh) {
  const bvh = buildBvh(mesh);
  return measureSolid(mesh, { shells: surfacesOf(mesh), bvh, crossings: findCrossings(mesh, bvh) });
}
const crossingsOf = (mesh: TriangleMesh) => findCrossings(mesh, buildBvh(mesh)).pairs;
const cube = (from: number, to: number) => box([from, from, from], [to, to, to]).mesh;

describe('wall thickness', () => {
  it('of a shell of 3 mm reads 3.00 ± 0.05 mm (common practice for large shells, no source)', () => {
    const ball = join([sphere(100, 160, 80).mesh, turnInsideOut(sphere(97, 160, 80).mesh)]);
    const casing = join([cube(0, 200), turnInsideOut(cube(3, 197))]);
    for (const mesh of [ball, casing]) {
      const { report } = measureWalls(mesh, buildBvh(mesh))!;
      expect(report.samples).toBeGreaterThanOrEqual(5000);
      expect(Math.abs(report.median - 3)).toBeLessThan(0.05);
      expect(Math.abs(report.p5 - 3)).toBeLessThan(0.05);
      expect(Math.abs(report.min - 3)).toBeLessThan(0.05);
    }
  });

  it('of a ball is its diameter', () => {
    const { report } = measureWalls(sphere(50, 128, 64).mesh, buildBvh(sphere(50, 128, 64).mesh))!;
    expect(Math.abs(report.median - 100)).toBeLessThan(0.2);
    expect(Math.abs(report.min - 100)).toBeLessThan(0.3);
    expect(Math.abs(report.max - 100)).toBeLessThan(0.3);
    expect(report.histogram.counts.reduce((sum, count) => sum + count)).toBe(report.samples);
  });

  it('of a wedge grows in proportion to the distance from its edge', () => {
    // Bottom z = 0, slope from (0, ·, 0) to (60, ·, 30): straight up from the bottom the wall is x / 2.
    const wedge = extrude(
      [
        [0, 0],
        [60, 0],
        [60, 30],
      ],
      [0, 1, 2],
      0,
      40,
    );
    const bvh = buildBvh(wedge);
    const points = Float64Array.from(
      { length: 300 },
      (_, i) => [0.6 + 0.59 * Math.floor(i / 3), 0, 20][i % 3]!,
    );
    const normals = Float64Array.from({ length: 300 }, (_, i) => [0, -1, 0][i % 3]!);
    const walls = wallsAt(points, normals, bvh);
    for (let i = 0; i < walls.length; i++) expect(walls[i]).toBeCloseTo(points[3 * i]! / 2, 5);
  });

  it('does not exist where a ray meets nothing', () => {
    const outward = wallsAt(
      Float64Array.of(0, 0, 60),
      Float64Array.of(0, 0, -1),
      buildBvh(sphere(50, 24, 12).mesh),
    );
    expect([...outward]).toEqual([0]);
  });
});

describe('crossing triangles', () => {
  it('are not reported on sound shapes, however fine or flat', () => {
    const step = voxels('steps', [4, 4, 4], 7, (x, y, z) => x + y + z < 5);
    const shapes = [
      sphere(50, 64, 32).mesh,
      torus(40, 12, 48, 24).mesh,
      torusKnot(30, 9, 400, 40),
      sevenEighthsCube(60).mesh,
      boxWithCavity(40, 20).mesh,
      step.mesh,
    ];
    for (const mesh of shapes) {
      expect(crossingsOf(mesh)).toBe(0);
      const far = {
        ...mesh,
        positions: Float64Array.from(mesh.positions, (value) => Math.fround(value + 1e5)),
      };
      expect(crossingsOf(far)).toBe(0);
    }
  });

  it('are counted once each where two solids run into each other', () => {
    // A post of 4 sides through the top and bottom of a plate, through the insides of 2 triangles each.
    const plate = box([-50, -50, -2], [50, 50, 2]).mesh;
    const post = box([-31, 7, -20], [-29, 9, 20]).mesh;
    const bvh = buildBvh(join([plate, post]));
    const { pairs, complete, triangles } = findCrossings(join([plate, post]), bvh);
    expect(complete).toBe(true);
    expect(pairs).toBeGreaterThanOrEqual(16);
    const keys = new Set<string>();
    for (let i = 0; i < triangles.length; i += 2)
      keys.add([triangles[i], triangles[i + 1]].sort().join());
    expect(keys.size).toBe(pairs);
    expect(
      [...keys].every((key) => new Set(key.split(',').map((t) => Number(t) < 12)).size === 2),
    ).toBe(true);
  });

  it('include facets that lie on each other, but not solids that touch in an edge or point', () => {
    expect(
      crossingsOf(join([box([0, 0, 0], [10, 10, 10]).mesh, box([2, 2, 10], [8, 8, 20]).mesh])),
    ).toBeGreaterThan(0);
    expect(crossingsOf(join([cube(0, 10), cube(10, 20)]))).toBe(0);
    expect(crossingsOf(join([cube(0, 10), box([10, 10, 0], [20, 20, 10]).mesh]))).toBe(0);
  });

  it('stop being counted when there are far too many', () => {
    const { pairs, triangles } = findCrossings(
      join([sphere(50, 64, 32).mesh, sphere(50.02, 61, 33).mesh]),
      buildBvh(join([sphere(50, 64, 32).mesh, sphere(50.02, 61, 33).mesh])),
      { mostPairs: 10 },
    );
    expect(pairs).toBeGreaterThan(10);
    expect(triangles.length).toBe(20);
  });
});

describe('the measures of a solid', () => {
  it('give the genus that manifold-3d gives', () => {
    const frame = voxels(
      'frame',
      [3, 3, 3],
      10,
      (x, y, z) => [x, y, z].filter((n) => n === 1).length < 2,
    );
    for (const [mesh, genus] of [
      [sphere(50, 32, 16).mesh, 0],
      [torus(40, 12, 32, 16).mesh, 1],
      [torusKnot(30, 5, 200, 12), 1],
      // A cube's frame: 12 struts, 8 corners, so 12 - 8 + 1 handles.
      [frame.mesh, 5],
    ] as const) {
      expect(measure(mesh).measures.genus).toBe(genus);
      const theirs = solids.withSolids(({ Manifold, Mesh, keep }) =>
        keep(
          new Manifold(
            new Mesh({
              numProp: 3,
              vertProperties: new Float32Array(mesh.positions),
              triVerts: mesh.indices,
            }),
          ),
        ).genus(),
      );
      expect(theirs).toBe(genus);
    }
    expect(measure(join([torus(40, 12, 32, 16).mesh, cube(100, 110)])).measures.genus).toBe(1);
  });

  it('give the shortest edge and the smallest shell', () => {
    const { measures } = measure(join([cube(0, 40), box([50, 0, 0], [50.5, 2, 3]).mesh]));
    expect(measures.shortestEdge).toBeCloseTo(0.5, 9);
    expect(measures.smallestShell).toBeCloseTo(3, 9);
    expect(measures.crossings).toEqual({ pairs: 0, complete: true });
  });

  it('point at thin walls and at crossings, apart from each other', () => {
    const plate = join([box([0, 0, 0], [300, 300, 20]).mesh]);
    const { places, measures } = measure(join([plate, box([310, 0, 0], [340, 300, 2]).mesh]));
    expect(measures.wall!.median).toBeCloseTo(20, 3);
    expect(places.length).toBeGreaterThan(2);
    expect(places.filter((place) => place.kind !== 'thin-wall' || place.at[0] < 300)).toEqual([]);
    const crossing = measure(join([cube(0, 40), cube(20, 60)])).places;
    expect(crossing.some((place) => place.kind === 'crossing')).toBe(true);
  });
});

describe('flat areas', () => {
  it('of a box are its six sides, largest first, with their middles', () => {
    const { mesh } = box([0, 0, 0], [30, 20, 10]);
    const flats = findFlats(mesh, Math.hypot(30, 20, 10));
    expect(flats.map((flat) => Math.round(flat.area))).toEqual([600, 600, 300, 300, 200, 200]);
    const top = flats.find((flat) => flat.normal[2] > 0.5)!;
    expect(top.normal).toEqual([0, 0, 1]);
    expect(top.centre[0]).toBeCloseTo(15, 9);
    expect(top.centre[2]).toBeCloseTo(10, 9);
  });

  it('are connected regions, and a ball has none', () => {
    const { mesh } = voxels('feet', [5, 1, 2], 10, (x, _, z) => z === 1 || x !== 2);
    const flats = findFlats(mesh, Math.hypot(50, 10, 20));
    expect(
      flats.filter((flat) => flat.normal[2] < -0.5).map((flat) => Math.round(flat.area)),
    ).toEqual([200, 200, 100]);
    expect(findFlats(sphere(50, 96, 48).mesh, 173)).toEqual([]);
  });

  it('include a cap of 1.2 % of a ball that is pressed flat, wherever it lies (seed 7)', () => {
    const random = seededRandom(7);
    for (let turn = 0; turn < 12; turn++) {
      const normal = randomDirection(random);
      const { mesh } = sphere(50, 240, 120);
      // A disc of 1.2 % of the surface: π (50² − height²) of about 4 π 50².
      const height = 50 * Math.sqrt(1 - 4 * 0.012);
      const p = mesh.positions;
      for (let i = 0; i < p.length; i += 3) {
        const above = normal[0] * p[i]! + normal[1] * p[i + 1]! + normal[2] * p[i + 2]! - height;
        if (above > 0) for (let k = 0; k < 3; k++) p[i + k] -= above * normal[k]!;
      }
      const inOrder = Array.from({ length: mesh.indices.length / 3 }, (_, i) => i);
      const places = inOrder.map(random);
      // Samples follow the list of facets; in any other order they fall less evenly.
      const order = turn % 2 === 0 ? inOrder : inOrder.toSorted((a, b) => places[a]! - places[b]!);
      const indices = Uint32Array.from(
        order.flatMap((i) => [...mesh.indices.subarray(3 * i, 3 * i + 3)]),
      );
      const flats = findFlats({ positions: p, indices }, Math.hypot(...boundingBox(p).size));
      expect(flats.length).toBe(1);
      const [flat] = flats;
      const [x, y, z] = flat!.normal;
      expect(x * normal[0] + y * normal[1] + z * normal[2]).toBeCloseTo(1, 5);
      // Facets on its rim lie partly on the ball, so that it lacks up to one facet all round.
      const area = Math.PI * (50 ** 2 - height ** 2);
      expect(flat!.area).toBeLessThanOrEqual(area);
      expect(flat!.area).toBeGreaterThan(0.8 * area);
    }
  });
});

describe('the survey of a surface', () => {
  it('counts what is there', () => {
    const { mesh, volumeMm3 } = boxWithCavity(40, 20);
    const state = surveySurface(mesh);
    expect(state).toMatchObject({ openEdges: 0, shells: 2, closed: true, duplicateFacets: 0 });
    expect(state.volume).toBeCloseTo(volumeMm3, 6);
    expect(surveySurface(turnInsideOut(mesh)).volume).toBeCloseTo(volumeMm3, 6);
    const open = { ...mesh, indices: mesh.indices.slice(3) };
    expect(surveySurface(open)).toMatchObject({ openEdges: 3, closed: false, volume: 0 });
    const sheet = { positions: mesh.positions, indices: Uint32Array.of(0, 1, 2, 0, 2, 1) };
    expect(surveySurface(sheet)).toMatchObject({ closed: true, duplicateFacets: 1 });
    expect([...boundingBox(mesh.positions).size]).toEqual(state.size);
  });
});
