import { describe, expect, it } from 'vitest';
import * as shapes from '../../../test/support/shapes.js';
import { applyMotion } from '../vectors/rigid-motion.js';
import { signedVolume } from './measure.js';
import { connectedShells, shellVolumes, splitIntoSolids } from './solids.js';
import { edgeReport } from './topology.js';
import { type TriangleMesh } from './triangle-mesh.js';

function cube(centre: readonly [number, number, number], side: number): TriangleMesh {
  const half = side / 2;
  const [x, y, z] = centre;
  return shapes.box([x - half, y - half, z - half], [x + half, y + half, z + half]).mesh;
}

const cavity = (centre: readonly [number, number, number], side: number) =>
  shapes.turnInsideOut(cube(centre, side));

const volumes = (solids: readonly TriangleMesh[]) => solids.map((solid) => signedVolume(solid));

describe('taking a mesh apart into solids', () => {
  it('returns a single shell as it is', () => {
    const { mesh } = shapes.torus(50, 18, 24, 12);
    expect(splitIntoSolids(mesh)).toEqual([mesh]);
    expect(splitIntoSolids(mesh)[0]).toBe(mesh);
  });

  it('has no solid in an empty mesh', () => {
    expect(
      splitIntoSolids({ positions: new Float64Array(0), indices: new Uint32Array(0) }),
    ).toEqual([]);
  });

  it('gives each solid the cavities directly inside it, through three layers of nesting', () => {
    const mesh = shapes.join([
      cavity([0, 0, 0], 10),
      cube([100, 0, 0], 20),
      cube([0, 0, 0], 60),
      cavity([100, 0, 0], 4),
      cube([0, 0, 0], 30),
      cavity([0, 0, 0], 50),
      cavity([0, 25.5, 0], 0.5),
      cavity([8, 8, 8], 2),
    ]);
    const solids = splitIntoSolids(mesh);
    expect(volumes(solids)).toEqual([
      60 ** 3 - 50 ** 3 - 0.5 ** 3,
      30 ** 3 - 10 ** 3 - 2 ** 3,
      20 ** 3 - 4 ** 3,
    ]);
    expect(solids.every((solid) => edgeReport(solid).closed)).toBe(true);
  });

  it('orders equal solids by their boxes and keeps tags with their triangles', () => {
    const mesh = shapes.join([cube([10, 0, 0], 2), cube([-10, 5, 0], 2), cube([-10, -5, 0], 2)]);
    const tags = Int32Array.from({ length: 36 }, (_, triangle) => Math.floor(triangle / 12));
    const solids = splitIntoSolids({ ...mesh, tags });
    expect(solids.map((solid) => solid.tags![0])).toEqual([2, 1, 0]);
    expect(solids.every((solid) => new Set(solid.tags).size === 1)).toBe(true);
  });

  it('keeps solids apart that share a single vertex', () => {
    const isSolid = (x: number, y: number, z: number) => x === y && y === z;
    const { mesh } = shapes.voxels('two cubes at a corner', [2, 2, 2], 10, isSolid);
    expect(mesh.positions.length / 3).toBe(15);
    expect(volumes(splitIntoSolids(mesh))).toEqual([1000, 1000]);
  });

  it('does not put a hollow into a hole of a ring', () => {
    const ring = shapes.torus(50, 18, 32, 16).mesh;
    const lone = cavity([0, 0, 0], 10);
    expect(volumes(splitIntoSolids(shapes.join([ring, lone]))).map(Math.sign)).toEqual([1, -1]);
  });

  it('finds the hollow in a turned ring wherever it lies in the tube', () => {
    const ring = shapes.torus(50, 18, 32, 16).mesh;
    for (let step = 0; step < 12; step++) {
      const angle = (2 * Math.PI * step) / 12;
      const inside = cavity([50 * Math.cos(angle), 50 * Math.sin(angle), 3], 8);
      const mesh = shapes.join([ring, inside]);
      const tilt = [1, 0, 0, 0, 0, 0.8, -0.6, 0, 0, 0.6, 0.8, 0];
      const turned = { ...mesh, positions: applyMotion(tilt, mesh.positions) };
      expect(splitIntoSolids(turned).length).toBe(1);
    }
  });

  it('numbers shells by their first triangle and measures them', () => {
    const mesh = shapes.join([cube([0, 0, 0], 2), cavity([5, 0, 0], 1), cube([9, 0, 0], 3)]);
    const shells = connectedShells(mesh);
    expect(shells.count).toBe(3);
    expect([0, 12, 24].map((triangle) => shells.labels[triangle])).toEqual([0, 1, 2]);
    expect([...shellVolumes(mesh, shells)].map((volume) => Math.round(volume * 1e9) / 1e9)).toEqual(
      [8, -1, 27],
    );
  });
});
