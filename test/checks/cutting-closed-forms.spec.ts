import { beforeAll, describe, expect, it } from 'vitest';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { dot, normalize } from '../../shared/geometry/vectors/vector3.js';
import { planeAnywhere } from '../support/cutting-planes.js';
import { randomDirection, seededRandom } from '../support/random.js';
import * as shapes from '../support/shapes.js';
import {
  loadManifold,
  type ManifoldModule,
  manifoldTriangulator,
} from '../support/triangulator.js';

const SEED = 314;

let manifold: ManifoldModule;
beforeAll(async () => {
  manifold = await loadManifold();
});

/** Volume above and below a plane, mm³, and the section's area, mm². */
function parts(mesh: TriangleMesh, plane: Plane) {
  const triangulate = manifoldTriangulator(manifold);
  const { above, below, sectionAreaMm2 } = cutMesh(mesh, plane, { triangulate, capTag: 1 });
  return { above: signedVolume(above), below: signedVolume(below), sectionAreaMm2 };
}

/** Area of a regular polygon of n sides over that of its circle: handbook, n/2 · sin(2π/n) / π. */
const polygonShare = (n: number) => ((n / 2) * Math.sin((2 * Math.PI) / n)) / Math.PI;

/**
 * Volume of a box from the origin below the plane n·p = c with all parts of n above 0:
 * Σ over the corners k of (-1)^|k| · max(0, c − n·k)³ / (6 nx ny nz).
 * Source: D. L. Barrow, P. W. Smith, Amer. Math. Monthly 86(2), 1979 (from memory).
 */
function boxBelow(size: Vector3, normal: Vector3, offset: number): number {
  let sum = 0;
  for (let corner = 0; corner < 8; corner++) {
    const bits = [corner & 1, (corner >> 1) & 1, corner >> 2];
    const at = bits.map((bit, axis) => bit * size[axis]!) as unknown as Vector3;
    const sign = (bits[0]! + bits[1]! + bits[2]!) % 2 === 0 ? 1 : -1;
    sum += sign * Math.max(0, offset - dot(normal, at)) ** 3;
  }
  return sum / (6 * normal[0] * normal[1] * normal[2]);
}

describe(`volumes of cut solids against closed forms, seed ${SEED}`, () => {
  it('cuts corners and slabs off a box on any slanted plane', () => {
    const random = seededRandom(SEED);
    const size: Vector3 = [70, 40, 30];
    const { mesh } = shapes.box([0, 0, 0], size);
    for (let round = 0; round < 60; round++) {
      const slanted = randomDirection(random).map((value) => Math.abs(value) + 0.05);
      const normal = normalize(slanted as unknown as Vector3);
      const { offset } = { ...planeAnywhere(mesh, random), offset: dot(normal, size) * random() };
      const { below } = parts(mesh, { normal, offset });
      // The formula is a difference of cubes, so it is itself good to about 1e-11 of the box.
      expect(Math.abs(below - boxBelow(size, normal, offset))).toBeLessThan(1e-9 * 84_000);
    }
  });

  it('truncates a prism on a slant: base area times the height over the middle', () => {
    // Handbook: a plane that meets only the sides of a prism.
    const random = seededRandom(SEED);
    for (const sides of [3, 6, 24, 101]) {
      const { mesh } = shapes.prism(30, 90, sides);
      const area = Math.PI * 30 ** 2 * polygonShare(sides);
      for (let round = 0; round < 10; round++) {
        const normal = normalize([0.8 * (random() - 0.5), 0.8 * (random() - 0.5), 1]);
        const height = 40 + 10 * random();
        const { below, sectionAreaMm2 } = parts(mesh, { normal, offset: normal[2] * height });
        expect(below / (area * height)).toBeCloseTo(1, 10);
        expect((sectionAreaMm2 * normal[2]) / area).toBeCloseTo(1, 10);
      }
    }
  });

  it('takes the top off a cone: the cube of the share of its height', () => {
    const { mesh, volumeMm3 } = shapes.cone(40, 90, 64);
    expect(volumeMm3).toBeCloseTo((Math.PI * 40 ** 2 * 90 * polygonShare(64)) / 3, 6);
    for (const height of [1, 30, 45, 77.7, 89.9]) {
      const { above, sectionAreaMm2 } = parts(mesh, { normal: [0, 0, 1], offset: height });
      const share = 1 - height / 90;
      expect(above / (volumeMm3 * share ** 3)).toBeCloseTo(1, 9);
      const base = Math.PI * 40 ** 2 * polygonShare(64);
      expect(sectionAreaMm2 / (base * share ** 2)).toBeCloseTo(1, 10);
    }
  });

  it('halves a torus through its axis and across it, and sections it as two profiles', () => {
    const [radius, tube, sides, rings] = [50, 18, 40, 20];
    const { mesh, volumeMm3 } = shapes.torus(radius, tube, sides, rings);
    // Pappus' theorem with both circles replaced by their polygons.
    const profile = Math.PI * tube ** 2 * polygonShare(rings);
    expect(volumeMm3).toBeCloseTo(2 * Math.PI * radius * profile * polygonShare(sides), 5);
    for (const angle of [0, 0.1, 1]) {
      const normal: Vector3 = [Math.cos(angle), Math.sin(angle), 0];
      expect(parts(mesh, { normal, offset: 0 }).above / volumeMm3).toBeCloseTo(0.5, 10);
    }
    const across = parts(mesh, { normal: [0, 0, 1], offset: 0 });
    expect(across.above / volumeMm3).toBeCloseTo(0.5, 10);
    const throughCorners = parts(mesh, { normal: [0, 1, 0], offset: 0 });
    expect(throughCorners.sectionAreaMm2).toBeCloseTo(2 * profile, 8);
  });

  it('approaches the handbook segment of a sphere, πh²(3R − h)/3, with finer tessellation', () => {
    const height = 20;
    const exact = (Math.PI * height ** 2 * (3 * 50 - height)) / 3;
    const random = seededRandom(SEED);
    const normal = randomDirection(random);
    const errors = [32, 64, 128].map((rings) => {
      const { mesh } = shapes.sphere(50, 2 * rings, rings);
      return Math.abs(parts(mesh, { normal, offset: 30 }).above / exact - 1);
    });
    expect(errors[0]! / errors[2]!).toBeGreaterThan(10);
    expect(errors[2]!).toBeLessThan(1e-3);
  });
});
