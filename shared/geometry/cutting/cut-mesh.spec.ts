import { beforeAll, describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import * as shapes from '../../../test/support/shapes.js';
import { loadManifold, manifoldTriangulator } from '../../../test/support/triangulator.js';
import { signedVolume, surfaceArea } from '../mesh/measure.js';
import { splitIntoSolids } from '../mesh/solids.js';
import { edgeReport } from '../mesh/topology.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../vectors/plane.js';
import { cutMesh, type PolygonTriangulator } from './cut-mesh.js';

const SEED = 77;
const CAP = 9;

let triangulate: PolygonTriangulator;
beforeAll(async () => {
  triangulate = manifoldTriangulator(await loadManifold());
});

const cut = (mesh: TriangleMesh, plane: Plane) =>
  cutMesh(mesh, plane, { triangulate, capTag: CAP });
const level = (offset: number): Plane => ({ normal: [0, 0, 1], offset });

/** Area, mm², of the triangles with the cap's tag. */
function capArea({ positions, indices, tags }: TriangleMesh): number {
  const cap = [...indices].filter((_, i) => tags![Math.floor(i / 3)] === CAP);
  return surfaceArea({ positions, indices: Uint32Array.from(cap) });
}

/** A polygon in x and z drawn out along y from 0 to `depth`. */
function drawn(polygon: readonly (readonly [number, number])[], depth: number): TriangleMesh {
  const fan = triangulate([Float64Array.from(polygon.flat())]);
  const { positions, indices } = shapes.extrude(polygon, [...fan], 0, depth);
  // (x, z, y) to (x, y, z) mirrors, so the y axis is turned round as well.
  const turned = positions.map((_, i) =>
    i % 3 === 0 ? positions[i]! : i % 3 === 1 ? depth - positions[i + 1]! : positions[i - 1]!,
  );
  return { positions: turned, indices };
}

/** Cubes at random; where some share only an edge, more are added until the surface is a 2-manifold. */
function randomHeap(random: () => number): shapes.Shape {
  const cells = Array.from({ length: 64 }, () => random() < 0.55);
  const isSolid = (x: number, y: number, z: number) => cells[16 * x + 4 * y + z]!;
  for (;;) {
    const heap = shapes.voxels('heap', [4, 4, 4], 10, isSolid);
    if (edgeReport(heap.mesh).closed) return heap;
    cells[randomInteger(random, 64)] = true;
  }
}

describe('cutting a mesh', () => {
  it('parts a box: volumes, caps, tags and area', () => {
    const { mesh } = shapes.box([0, 0, 0], [10, 20, 30]);
    const tags = new Int32Array(12).fill(4);
    const { above, below, capTriangles, sectionAreaMm2 } = cut({ ...mesh, tags }, level(12));
    expect(signedVolume(above)).toBeCloseTo(10 * 20 * 18, 9);
    expect(signedVolume(below)).toBeCloseTo(10 * 20 * 12, 9);
    expect(sectionAreaMm2).toBeCloseTo(200, 10);
    expect(capArea(above)).toBeCloseTo(200, 10);
    expect(capArea(below)).toBeCloseTo(200, 10);
    for (const side of [above, below]) {
      expect(edgeReport(side).closed).toBe(true);
      expect(side.tags!.filter((tag) => tag === CAP).length).toBe(capTriangles);
      expect(new Set(side.tags)).toEqual(new Set([4, CAP]));
      expect(new Set(side.indices).size).toBe(side.positions.length / 3);
    }
  });

  it('puts every cap vertex exactly on a plane across an axis', () => {
    const { above, tags } = { ...cut(shapes.sphere(50, 40, 24).mesh, level(0.1)), tags: null };
    expect(tags).toBeNull();
    const heights = [...above.indices]
      .filter((_, i) => above.tags![Math.floor(i / 3)] === CAP)
      .map((vertex) => above.positions[3 * vertex + 2]);
    expect(new Set(heights)).toEqual(new Set([0.1]));
  });

  it('returns the mesh itself when the plane misses it or lies along an outer face', () => {
    const { mesh } = shapes.box([0, 0, 0], [10, 20, 30]);
    for (const offset of [30, 31]) {
      expect(cut(mesh, level(offset)).below).toBe(mesh);
      expect(cut(mesh, level(offset)).above.indices.length).toBe(0);
      expect(cut(mesh, level(offset)).above.positions.length).toBe(0);
    }
    for (const offset of [0, -1]) expect(cut(mesh, level(offset)).above).toBe(mesh);
  });

  it('leaves no sheet of no thickness along a face inside the solid', () => {
    const { mesh } = shapes.sevenEighthsCube(80);
    for (const axis of [0, 1, 2]) {
      const normal = [0, 1, 2].map((k) => (k === axis ? 1 : 0)) as unknown as Vector3;
      const { above, below, sectionAreaMm2 } = cut(mesh, { normal, offset: 40 });
      expect(sectionAreaMm2).toBeCloseTo(3 * 40 * 40, 9);
      expect(signedVolume(above)).toBeCloseTo(3 * 40 ** 3, 6);
      expect(signedVolume(below)).toBeCloseTo(4 * 40 ** 3, 6);
      // The upper part is an L, the lower a plain slab: their surfaces tell a hidden sheet.
      expect(surfaceArea(above)).toBeCloseTo(2 * 3 * 40 ** 2 + 8 * 40 ** 2, 6);
      expect(surfaceArea(below)).toBeCloseTo(2 * 80 ** 2 + 4 * 80 * 40, 6);
    }
  });

  it(`stays closed on every grid plane of random cube heaps, seed ${SEED}`, () => {
    const random = seededRandom(SEED);
    for (let heapNumber = 0; heapNumber < 60; heapNumber++) {
      const heap = randomHeap(random);
      for (let plane = 0; plane < 18; plane++) {
        const axis = plane % 3;
        const sign = plane % 2 === 0 ? 1 : -1;
        const normal = [0, 1, 2].map((k) => (k === axis ? sign : 0)) as unknown as Vector3;
        const offset = sign * 10 * (1 + randomInteger(random, 3));
        const { above, below } = cut(heap.mesh, { normal, offset });
        expect(edgeReport(above).closed).toBe(true);
        expect(edgeReport(below).closed).toBe(true);
        const volume = signedVolume(above) + signedVolume(below);
        expect(volume).toBeCloseTo(heap.volumeMm3, 6);
        expect(capArea(above)).toBeCloseTo(capArea(below), 6);
      }
    }
  });

  it('gives no cap to a ridge that only touches the plane', () => {
    const peaks = drawn(
      [
        [0, 0],
        [40, 0],
        [30, 20],
        [20, 5],
        [10, 10],
      ],
      50,
    );
    const { above, below, sectionAreaMm2 } = cut(peaks, level(10));
    expect(edgeReport(above).closed).toBe(true);
    expect(edgeReport(below).closed).toBe(true);
    expect(splitIntoSolids(above).length).toBe(1);
    expect(signedVolume(above) + signedVolume(below)).toBeCloseTo(signedVolume(peaks), 8);
    // The higher peak alone: between x = 20 + 10/3 and 35.
    expect(sectionAreaMm2).toBeCloseTo(50 * (35 - (20 + 10 / 3)), 9);
  });

  it('cuts through a vertex without a second vertex beside it', () => {
    const { mesh } = shapes.cone(40, 90, 16);
    const [x, y] = [mesh.positions[3], mesh.positions[4]];
    const plane: Plane = { normal: [0, 1, 0], offset: y! };
    expect([x, y]).toEqual([40, 0]);
    const { above, below } = cut(mesh, plane);
    // Half the ring, the apex and the centre, all of them old vertices.
    expect(above.positions.length / 3).toBe(11);
    expect(below.positions.length / 3).toBe(11);
    expect(signedVolume(above) / signedVolume(below)).toBeCloseTo(1, 12);
  });

  it('caps a ring and a hollow with their holes', () => {
    const hollow = cut(shapes.boxWithCavity(60, 30).mesh, level(30));
    expect(hollow.sectionAreaMm2).toBeCloseTo(60 ** 2 - 30 ** 2, 9);
    expect(splitIntoSolids(hollow.above).length).toBe(1);
    const ring = cut(shapes.torus(50, 18, 40, 21).mesh, level(2));
    expect(edgeReport(ring.above).closed).toBe(true);
    expect(capArea(ring.above)).toBeCloseTo(ring.sectionAreaMm2, 8);
  });

  it('cuts an open mesh without a cap where the border reaches the plane', () => {
    const { positions, indices } = shapes.box([0, 0, 0], [10, 10, 10]).mesh;
    const open = { positions, indices: indices.slice(0, 30) };
    const { above, below, capTriangles } = cut(open, level(5));
    expect(capTriangles).toBe(0);
    expect(surfaceArea(above) + surfaceArea(below)).toBeCloseTo(surfaceArea(open), 9);
  });

  it('gives the same bytes twice', () => {
    const mesh = shapes.torusKnot(40, 16, 60, 12);
    const plane: Plane = { normal: [0.6, 0, 0.8], offset: 3 };
    expect(cut(mesh, plane)).toEqual(cut(mesh, plane));
  });
});
