import { describe, expect, it } from 'vitest';
import { cutMesh } from '../../../shared/geometry/cutting/cut-mesh.js';
import { box, boxWithCavity, sphere, torus } from '../../../test/support/shapes.js';
import { lumpyBody } from '../../../test/support/planning-shapes.js';
import { signedFan } from '../signed-fan.js';
import { creasePlanes } from './creases.js';
import { findMirrors, mirrored } from './find-mirror.js';
import { planZone } from './plan-zone.js';
import { seamCost } from './seam-sight.js';
import { measureWorth, nameTriangles, worthOfTag } from './surface-worth.js';

describe('measureWorth', () => {
  it('gives all of a ball full worth and the inside of a closed box none', () => {
    expect(Math.min(...measureWorth(sphere(50, 24, 16).mesh, [], []).ofTriangle)).toBe(1);
    const hollow = boxWithCavity(100, 60).mesh;
    const { ofTriangle } = measureWorth(hollow, [], []);
    expect([...ofTriangle.subarray(0, 12)].every((worth) => worth === 1)).toBe(true);
    expect([...ofTriangle.subarray(12)].every((worth) => worth === 0)).toBe(true);
  });

  it('gives the inner side of a ring less than its outer side', () => {
    const mesh = torus(60, 20, 48, 24).mesh;
    const worth = measureWorth(mesh, [], []);
    expect(worth.at(80, 0, 0)).toBeGreaterThan(worth.at(40, 0, 0) + 0.1);
  });

  it('follows the show directions: the front counts, the back hardly', () => {
    const mesh = box([0, 0, 0], [10, 10, 10]).mesh;
    const worth = measureWorth(mesh, [[0, -5, 0]], []);
    expect(worth.at(5, 0, 5)).toBeCloseTo(1, 6);
    expect(worth.at(5, 10, 5)).toBeCloseTo(0.15, 6);
    expect(worth.at(0, 5, 5)).toBeCloseTo(0.15, 6);
  });

  it('makes a show zone three times as dear', () => {
    const mesh = sphere(50, 24, 16).mesh;
    const zone = planZone(
      { shape: 'sphere', name: 'face', centre: [50, 0, 0], radiusMm: 20 },
      mesh,
    );
    const worth = measureWorth(mesh, [], [zone]);
    expect(worth.at(50, 0, 0)).toBe(3);
    expect(worth.at(-50, 0, 0)).toBe(1);
  });

  it('knows where triangles of cut parts come from, and that caps show to nobody', () => {
    const mesh = nameTriangles(boxWithCavity(100, 60).mesh);
    const worth = measureWorth(mesh, [], []);
    const plane = { normal: [0, 0, 1], offset: 50 } as const;
    const { above } = cutMesh(mesh, plane, { triangulate: signedFan, capTag: 7 });
    const values = [...above.tags!].map((tag) => worthOfTag(worth, tag));
    expect(new Set(values)).toEqual(new Set([0, 1]));
    expect(worthOfTag(worth, 7)).toBe(0);
    expect(worthOfTag(worth, -1)).toBe(1);
    expect(worthOfTag(worth, -13)).toBe(0);
  });
});

describe('creases', () => {
  it('are the twelve edges of a box, and none on a ball', () => {
    const { creases } = measureWorth(box([0, 0, 0], [30, 20, 10]).mesh, [], []);
    expect(creases.map((crease) => crease.lengthMm)).toEqual([
      ...[30, 30, 30, 30],
      ...[20, 20, 20, 20],
      ...[10, 10, 10, 10],
    ]);
    expect(measureWorth(sphere(50, 48, 32).mesh, [], []).creases).toEqual([]);
  });

  it('are found by the planes that hold them', () => {
    const { creases } = measureWorth(box([0, 0, 0], [30, 20, 10]).mesh, [], []);
    const found = creasePlanes(creases, [0, 0, 1], [-1, 11], () => true, 4);
    expect(found).toEqual([
      { offset: 0, lengthMm: 100 },
      { offset: 10, lengthMm: 100 },
    ]);
    // Those at the ends of the range are no cuts.
    expect(creasePlanes(creases, [0, 0, 1], [0, 10], () => true, 4)).toEqual([]);
  });
});

describe('seamCost', () => {
  it('measures the line of a cut on the surface, once, and half of it along a crease', () => {
    const mesh = box([0, 0, 0], [40, 30, 100]).mesh;
    const worth = measureWorth(mesh, [], []);
    const cut = cutMesh(
      mesh,
      { normal: [0, 0, 1], offset: 60 },
      { triangulate: signedFan, capTag: 1 },
    );
    const [line] = seamCost([cut.above, cut.below], 1, worth);
    expect(line!.outlineMm).toBeCloseTo(140, 9);
    expect(line!.sightMm).toBeCloseTo(140, 6);
    expect(line!.creaseMm).toBe(0);
    const creased = {
      ...worth,
      creases: [{ from: [0, 0, 60], to: [40, 0, 60], lengthMm: 40 }],
    } as const;
    const [followed] = seamCost([cut.above, cut.below], 1, creased);
    expect(followed!.creaseMm).toBeCloseTo(40, 9);
    expect(followed!.sightMm).toBeCloseTo(120, 6);
  });
});

describe('findMirrors', () => {
  it('finds the three planes of a box and none of a lumpy body', () => {
    const planes = findMirrors(box([10, 20, 30], [70, 60, 50]).mesh);
    expect(planes.map(({ normal }) => normal.map(Math.abs).join())).toEqual(
      expect.arrayContaining(['1,0,0', '0,1,0', '0,0,1']),
    );
    const across = planes.find(({ normal }) => Math.abs(normal[0]) === 1)!;
    expect(Math.abs(across.offset)).toBeCloseTo(40, 9);
    expect(findMirrors(lumpyBody(100, 7, 3))).toEqual([]);
  });

  it('mirrors a plane so that mirrored points keep their distance', () => {
    const mirror = { normal: [0.6, 0.8, 0], offset: 7 } as const;
    const plane = { normal: [0, 0.6, -0.8], offset: -3 } as const;
    const image = mirrored(plane, mirror);
    for (const p of [
      [1, 2, 3],
      [-4, 0.5, 9],
    ] as const) {
      const off = 2 * (0.6 * p[0] + 0.8 * p[1] - 7);
      const q = [p[0] - off * 0.6, p[1] - off * 0.8, p[2]];
      const before = plane.normal[1] * p[1] + plane.normal[2] * p[2] - plane.offset;
      const after =
        image.normal[0] * q[0]! + image.normal[1] * q[1]! + image.normal[2] * q[2]! - image.offset;
      expect(after).toBeCloseTo(before, 9);
    }
  });
});
