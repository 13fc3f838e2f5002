import { beforeAll, describe, expect, it } from 'vitest';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { normalize } from '../../shared/geometry/vectors/vector3.js';
import { bowl, lumpyBody } from '../../test/support/planning-shapes.js';
import { box, cone, prism, sphere, torus, torusKnot, voxels } from '../../test/support/shapes.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { orientPiece, type OrientTask, rateAs, spreadDirections } from './orient-piece.js';
import { RatedPiece } from './rate-orientation.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

const task: OrientTask = {
  overhangDegrees: 45,
  bridgeMm: 5,
  showDirections: [],
  socketAxes: [],
  pinAxes: [],
  spaces: [{ shape: 'rectangular', widthMm: 400, depthMm: 400, heightMm: 400 }],
};

const part = (mesh: TriangleMesh, plane: Plane) =>
  cutMesh(mesh, plane, { triangulate: solids.triangulate, capTag: 1 }).below;
const tilted = (offset: number): Plane => ({ normal: normalize([2, 1, 3]), offset });

/** Ten pieces as they come from cuts, and some that do not. */
const shapes: readonly (readonly [string, () => TriangleMesh])[] = [
  ['a box', () => box([0, 0, 0], [60, 90, 140]).mesh],
  ['a ball cut aslant', () => part(sphere(70, 48, 24).mesh, tilted(20))],
  ['a cone', () => cone(50, 90, 48).mesh],
  ['a prism cut aslant', () => part(prism(40, 160, 32).mesh, tilted(60))],
  ['a ring', () => torus(70, 22, 48, 16).mesh],
  ['part of a knot', () => part(torusKnot(60, 20, 160, 12), tilted(-10))],
  ['part of a lumpy body', () => part(lumpyBody(80, 9, 3), tilted(15))],
  ['part of a bowl', () => part(bowl(90, 4, 48, 16), tilted(-20))],
  ['a T', () => voxels('tee', [5, 1, 4], 20, (x, _y, z) => z === 3 || x === 2).mesh],
  [
    'a bracket',
    () =>
      voxels('bracket', [4, 3, 4], 20, (x, y, z) => x === 0 || z === 0 || (y === 1 && x + z < 5))
        .mesh,
  ],
];

describe('orientPiece', () => {
  it.each(shapes)(
    'lays %s never worse than upright and within 5 % of 2,000 directions tried in turn',
    async (_, make) => {
      const mesh = make();
      const [best] = await orientPiece(mesh, task);
      const upright = rateAs(mesh, task, [0, 0, -1]);
      expect(best!.cost).toBeLessThanOrEqual(upright.cost);
      const piece = new RatedPiece(mesh, task);
      const tried = spreadDirections(2000).map((down) => piece.rate(down, 3));
      tried.sort((a, b) => a.cost - b.cost);
      // The 40 best of the rough pass, measured as finely as the product's own.
      const fine = tried.slice(0, 40).map(({ down }) => rateAs(mesh, task, down).cost);
      expect(best!.cost).toBeLessThanOrEqual(1.05 * Math.min(...fine));
    },
    60_000,
  );

  it('lays a T so that it needs no support and stands a cone on its base', async () => {
    const [tee] = await orientPiece(shapes[8]![1](), task);
    expect(tee!.supportMm3).toBe(0);
    expect(tee!.contactMm2).toBeGreaterThan(2000);
    const [spike] = await orientPiece(cone(50, 90, 48).mesh, task);
    expect(spike!.down[2]).toBeCloseTo(-1, 6);
  });

  it('never lays a fixed pin against the bed', async () => {
    const mesh = box([0, 0, 0], [60, 60, 20]).mesh;
    const pinned = { ...task, pinAxes: [[0, 0, -1] as const] };
    const [best] = await orientPiece(mesh, pinned);
    expect(best!.down[2]).toBeCloseTo(1, 6);
  });

  it('keeps support off the side in show when the other side is as good', async () => {
    // A double wedge: either side can take the support.
    const mesh = torus(70, 22, 48, 16).mesh;
    const shown = { ...task, showDirections: [[0, 0, 1] as const] };
    const [best] = await orientPiece(mesh, shown);
    expect(best!.down[2]).toBeLessThan(0);
  });

  it('takes the first space that holds it, keeps pins inside, and gives nothing when none does', async () => {
    const mesh = box([0, 0, 0], [60, 90, 140]).mesh;
    const small = { shape: 'rectangular', widthMm: 50, depthMm: 50, heightMm: 50 } as const;
    const [best] = await orientPiece(mesh, { ...task, spaces: [small, ...task.spaces] });
    expect(best!.space).toBe(1);
    expect(await orientPiece(mesh, { ...task, spaces: [small] })).toEqual([]);
    const tight = { shape: 'rectangular', widthMm: 61, depthMm: 91, heightMm: 141 } as const;
    const alsoInside = Float64Array.of(30, 45, 150);
    expect(await orientPiece(mesh, { ...task, spaces: [tight], alsoInside })).toEqual([]);
  });

  it('says how a piece stands: foot, height and tipping by closed forms', () => {
    const rating = rateAs(box([0, 0, 0], [40, 60, 120]).mesh, task, [0, 0, -1]);
    expect(rating.contactMm2).toBeCloseTo(2400, 6);
    expect(rating.heightMm).toBe(120);
    expect(rating.tipping).toBeCloseTo(60 / 20, 9);
    expect(rating.supportMm3).toBe(0);
    expect(rateAs(sphere(20, 32, 16).mesh, task, [1, 0, 0]).contactMm2).toBeLessThan(20);
  });
});
