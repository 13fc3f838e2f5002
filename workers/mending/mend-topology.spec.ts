import { beforeAll, describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { roundAndWeld } from '../../shared/geometry/mesh/rounded.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { weldTriangles } from '../../shared/geometry/mesh/weld.js';
import { identityMotion } from '../../shared/geometry/vectors/rigid-motion.js';
import {
  addFins,
  addSlivers,
  duplicateFacets,
  flipFacets,
  jitterCorners,
  makeTJunctions,
} from '../../test/support/damage.js';
import { randomInteger, seededRandom } from '../../test/support/random.js';
import {
  box,
  boxWithCavity,
  join,
  sevenEighthsCube,
  sphere,
  torus,
  torusKnot,
  turnInsideOut,
  voxels,
} from '../../test/support/shapes.js';
import { surfaceDeviation } from '../measuring/surface-deviation.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { mendTopology } from './mend-topology.js';
import { orientShells } from './orient-shells.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

const shapes = [
  { name: 'ball', mesh: sphere(50, 32, 16).mesh },
  { name: 'ring', mesh: torus(40, 12, 32, 16).mesh },
  { name: 'cube without an octant', mesh: sevenEighthsCube(60).mesh },
  { name: 'box with a hollow', mesh: boxWithCavity(60, 30).mesh },
];
const damages: [string, (mesh: TriangleMesh, random: () => number) => TriangleMesh, string[]][] = [
  ['30 % of the facets turned', (mesh, random) => flipFacets(mesh, 0.3, random), ['turn-facets']],
  [
    'a third of the facets twice',
    (mesh, random) => duplicateFacets(mesh, 0.33, random),
    ['drop-duplicates'],
  ],
  [
    'every facet once for each side',
    (mesh, random) => duplicateFacets(mesh, 1, random, true),
    ['drop-duplicates'],
  ],
  ['fins', (mesh, random) => addFins(mesh, 5, 9, random), ['drop-duplicates']],
  ['T-junctions', (mesh, random) => makeTJunctions(mesh, 0.2, random), ['stitch']],
  ['slivers', (mesh, random) => addSlivers(mesh, 0.2, random), ['drop-flat']],
  [
    'cracks everywhere',
    (mesh, random) => weldTriangles(jitterCorners(mesh, 1e-4, random)).mesh,
    ['weld'],
  ],
];

/** manifold-3d's own volume of a mesh it takes; throws on one it does not. */
function outsideVolume(mesh: TriangleMesh): number {
  return solids.withSolids(({ Manifold, Mesh, keep }) => {
    const vertProperties = Float32Array.from(mesh.positions);
    return keep(
      new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: mesh.indices })),
    ).volume();
  });
}

/** As a reader gives it: corners in one place are one vertex. */
function welded({ positions, indices }: TriangleMesh): TriangleMesh {
  const soup = Float64Array.from({ length: 3 * indices.length }, (_, i) => {
    return positions[3 * indices[Math.floor(i / 3)]! + (i % 3)]!;
  });
  return weldTriangles(soup).mesh;
}

describe('mending what hangs together wrongly', () => {
  for (const [damage, breakIt, kinds] of damages)
    it.each(shapes)(`closes a $name with ${damage} and keeps its shape`, ({ mesh }) => {
      const broken = welded(breakIt(mesh, seededRandom(99)));
      const before = { positions: broken.positions.slice(), indices: broken.indices.slice() };
      const mended = mendTopology(broken);
      expect({ positions: broken.positions, indices: broken.indices }).toEqual(before);
      const oriented = orientShells(mended.mesh);
      expect(edgeReport(oriented.mesh).closed).toBe(true);
      const volume = signedVolume(mesh);
      expect(Math.abs(signedVolume(oriented.mesh) / volume - 1)).toBeLessThan(1e-5);
      expect(Math.abs(outsideVolume(oriented.mesh) / volume - 1)).toBeLessThan(1e-5);
      expect(surfaceDeviation(oriented.mesh, buildBvh(mesh), 2000)!.max).toBeLessThan(2.1e-4);
      expect(surfaceDeviation(mesh, buildBvh(oriented.mesh), 2000)!.max).toBeLessThan(2.1e-4);
      for (const kind of kinds) expect(mended.steps.map((step) => step.kind)).toContain(kind);
      for (const { count, sentence } of mended.steps) {
        expect(count).toBeGreaterThan(0);
        expect(sentence).toMatch(/^\d.*\.$/);
      }
      const again = mendTopology(oriented.mesh);
      expect(again.steps).toEqual([]);
      expect(again.mesh).toBe(oriented.mesh);
    });

  it('returns a sound mesh itself', () => {
    for (const { mesh } of [...shapes, { mesh: torusKnot(30, 5, 200, 12) }]) {
      expect(mendTopology(mesh)).toEqual({ mesh, steps: [], places: [] });
      expect(mendTopology(mesh).mesh).toBe(mesh);
      expect(orientShells(mesh).mesh).toBe(mesh);
    }
  });

  it('counts turned and doubled facets exactly', () => {
    const { mesh } = sphere(50, 32, 16);
    const few = flipFacets(mesh, 0.1, seededRandom(5));
    const turned = few.indices.filter(
      (value, i) => i % 3 === 1 && value !== mesh.indices[i],
    ).length;
    expect(mendTopology(few).steps).toMatchObject([{ kind: 'turn-facets', count: turned }]);
    const more = duplicateFacets(mesh, 0.25, seededRandom(6));
    const added = (more.indices.length - mesh.indices.length) / 3;
    expect(mendTopology(more).steps).toMatchObject([{ kind: 'drop-duplicates', count: added }]);
  });

  const cubes = (filled: readonly string[]) =>
    voxels('cubes', [3, 3, 3], 10, (x, y, z) => filled.includes(`${x}${y}${z}`));
  it.each([
    ['an edge', cubes(['000', '110']), { edges: 1 }],
    ['a corner', cubes(['000', '111']), { edges: 0 }],
    ['four edges in a ring', cubes(['100', '010', '210', '120']), { edges: 4 }],
  ])('takes cubes apart that touch in %s, for good', (_, { mesh }, { edges }) => {
    const { mesh: apart, steps } = mendTopology(mesh);
    expect(steps.find((step) => step.kind === 'split-edges')?.count ?? 0).toBe(edges);
    expect(steps.length).toBeGreaterThan(0);
    expect(edgeReport(apart).closed).toBe(true);
    expect(signedVolume(apart)).toBeCloseTo(signedVolume(mesh), 9);
    expect(outsideVolume(apart)).toBeCloseTo(signedVolume(mesh), 2);
    expect(roundAndWeld(apart, identityMotion).report.closed).toBe(true);
  });

  it('leaves a Möbius band open and says where it contradicts itself', () => {
    const [indices, positions]: [number[], number[]] = [[], []];
    const steps = 24;
    for (let i = 0; i < steps; i++)
      for (const half of [-1, 1]) {
        const angle = (2 * Math.PI * i) / steps;
        const r = 40 + half * 8 * Math.cos(angle / 2);
        positions.push(r * Math.cos(angle), r * Math.sin(angle), half * 8 * Math.sin(angle / 2));
      }
    for (let i = 0; i < steps; i++) {
      const [a, b] = [2 * i, 2 * i + 1];
      const [c, d] = i + 1 < steps ? [a + 2, b + 2] : [1, 0];
      indices.push(a, c, b, b, c, d);
    }
    const band = { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
    const { mesh, places } = mendTopology(band);
    expect(edgeReport(mesh).closed).toBe(false);
    expect(places.some((place) => /one side only/.test(place.sentence))).toBe(true);
  });

  it('answers 3 000 random soups with a mesh that is no worse (seed 31)', () => {
    const random = seededRandom(31);
    for (let run = 0; run < 3000; run++) {
      const side = 2 + randomInteger(random, 3);
      const soup = Float64Array.from({ length: 9 * (1 + randomInteger(random, 14)) }, () =>
        randomInteger(random, side),
      );
      const { mesh } = weldTriangles(soup);
      if (mesh.indices.length === 0) continue;
      const mended = mendTopology(mesh);
      const vertices = mended.mesh.positions.length / 3;
      expect(mended.mesh.indices.every((index) => index < vertices)).toBe(true);
      expect(mended.mesh.positions.every(Number.isFinite)).toBe(true);
      const report = edgeReport(mended.mesh);
      expect(report.nonManifoldEdges).toBe(0);
      if (report.closed && mended.mesh.indices.length > 0) orientShells(mended.mesh);
    }
  });
});

describe('turning shells outward', () => {
  const cube = (from: number, to: number) => box([from, from, from], [to, to, to]).mesh;

  it('goes by how they lie in each other, whichever way they come', () => {
    const right = join([cube(0, 40), turnInsideOut(cube(5, 35)), cube(10, 30), cube(50, 60)]);
    const volume = 40 ** 3 - 30 ** 3 + 20 ** 3 + 10 ** 3;
    for (const mesh of [
      right,
      turnInsideOut(right),
      join([cube(0, 40), cube(5, 35), cube(10, 30), turnInsideOut(cube(50, 60))]),
    ]) {
      const oriented = orientShells(mesh);
      expect(signedVolume(oriented.mesh)).toBeCloseTo(volume, 6);
      expect(oriented).toMatchObject({ cavities: 1, flat: 0, complete: true });
      expect(oriented.turnedOutward).toBe(signedVolume(mesh) < 0 && mesh !== right);
    }
  });

  it('drops shells that enclose nothing', () => {
    const sheet = {
      positions: Float64Array.of(90, 0, 0, 99, 0, 0, 90, 9, 0),
      indices: Uint32Array.of(0, 1, 2, 0, 2, 1),
    };
    const oriented = orientShells(join([cube(0, 40), sheet]));
    expect(oriented).toMatchObject({ flat: 1, cavities: 0 });
    expect(oriented.shells.count).toBe(1);
    expect(oriented.mesh.positions.length).toBe(24);
    expect(orientShells(sheet).mesh.indices.length).toBe(0);
  });
});
