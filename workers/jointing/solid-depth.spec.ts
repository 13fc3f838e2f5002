import { beforeAll, describe, expect, it } from 'vitest';
import { capFrame } from '../../shared/geometry/features/cap-frame.js';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { seamPlane } from '../../shared/geometry/sections/seam-plane.js';
import { box, boxWithCavity, sphere } from '../../test/support/shapes.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { NearCap } from './solid-depth.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

const level = (offset: number) => ({ normal: [0, 0, 1] as const, offset });
const below = (mesh: Parameters<typeof cutMesh>[0], offset: number) =>
  cutMesh(mesh, level(offset), { triangulate: solids.triangulate, capTag: 1 }).below;
const frameAt = (offset: number) =>
  capFrame(seamPlane(level(offset), [0, 0, offset]), [0, 0, 1], true);

describe('NearCap', () => {
  it('reaches the floor of a box, and nothing where the disc is over the side', () => {
    const half = below(box([-20, -20, 0], [20, 20, 60]).mesh, 25);
    const discs = [
      { x: 0, y: 0, radiusMm: 3 },
      { x: 16.9, y: 0, radiusMm: 3 },
      { x: 17.5, y: 0, radiusMm: 3 },
    ];
    expect([...new NearCap(half, 1, frameAt(25), 100).depths(discs)]).toEqual([25, 25, 0]);
    expect([...new NearCap(half, 1, frameAt(25), 10).depths(discs.slice(0, 1))]).toEqual([10]);
  });

  it('stops at the roof of a hollow', () => {
    const half = below(boxWithCavity(30, 20).mesh, 29);
    const [depth] = new NearCap(half, 1, frameAt(29), 100).depths([{ x: 15, y: 15, radiusMm: 2 }]);
    expect(depth).toBeCloseTo(4, 9);
  });

  it('follows the closed form on a ball cut in the middle: the rim of the disc sinks first', () => {
    const half = below(sphere(40, 720, 720).mesh, 0);
    for (const [x, radiusMm] of [
      [0, 5],
      [20, 4],
      [33, 6],
    ] as const) {
      const [depth] = new NearCap(half, 1, frameAt(0), 100).depths([{ x, y: 0, radiusMm }]);
      expect(depth).toBeCloseTo(Math.sqrt(40 ** 2 - (x + radiusMm) ** 2), 1);
    }
  });

  it('does not miss walls on the very edge of the face that it looks within', () => {
    const half = below(box([-20, -20, 0], [20, 20, 60]).mesh, 25);
    // A little smaller than the face, as a rounded outline is.
    const outline = Float64Array.of(-20, -20, 19.999, -20, 19.999, 19.999, -20, 19.999);
    const near = new NearCap(half, 1, frameAt(25), 30, outline);
    expect([...near.depths([{ x: 17.5, y: 0, radiusMm: 3 }])]).toEqual([0]);
  });
});
