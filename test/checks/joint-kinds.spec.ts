import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { capFrame, mirrorLoop } from '../../shared/geometry/features/cap-frame.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import { inCap, pinFeatures } from '../../workers/jointing/pin-features.js';
import { markFeature } from '../../workers/jointing/place-marks.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import { cutAt, jointed } from '../support/jointed.js';
import { seamDrawing } from '../support/seam-drawing.js';
import { box, boxWithCavity, facetedTurning, voxels } from '../support/shapes.js';

/**
 * Which joint which section gets and why, each drawn into dist/test/joints for a person to look at:
 * copper is a socket's mouth, blue its ground, letters are engraved.
 */
const FOLDER = join('dist', 'test', 'joints');

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
  await mkdir(FOLDER, { recursive: true });
});

const level = (offset: number): PlaneTree => cutAt({ normal: [0, 0, 1], offset });
/** A tube standing on z = 0. */
const tube = (outer: number, inner: number, height: number) =>
  facetedTurning(
    'tube',
    [
      [inner, 0],
      [outer, 0],
      [outer, height],
      [inner, height],
    ],
    96,
  ).mesh;

async function draw(name: string, mesh: TriangleMesh, tree: PlaneTree) {
  const made = jointed(solids, mesh, tree);
  for (const [k, seam] of made.seams.entries()) {
    const joint = made.joints[k]!;
    for (const isAbove of [true, false]) {
      const frame = capFrame(seam.plane, seam.normal, !isAbove);
      const features = pinFeatures(joint, {
        frame,
        isAbove,
        up: [1, 0, 0],
        material: usualMaterial,
        edgeBevelMm: 0.4,
      });
      const region = isAbove ? seam.region.map(mirrorLoop) : seam.region;
      const mark = markFeature(solids, {
        frame,
        region,
        edgeBevelMm: 0.4,
        obstacles: joint.pins.map((pin) => ({ ...inCap(pin, isAbove), radiusMm: pin.diameterMm })),
        name: isAbove ? seam.above : seam.below,
        neighbour: isAbove ? seam.below : seam.above,
      });
      const lips = joint.lips.map(({ section }) => ({
        levels: [{ loops: isAbove ? section.map(mirrorLoop) : section, depthMm: -1 }],
      }));
      const drawing = seamDrawing(
        `${name}, ${isAbove ? seam.above : seam.below}`,
        region,
        [...features, ...(mark ? [mark] : []), ...lips],
        [joint.reason, ...joint.notes],
      );
      await writeFile(join(FOLDER, `${name}-${k + 1}-${isAbove ? 'above' : 'below'}.svg`), drawing);
    }
  }
  for (const { name: piece } of made.plain)
    expect(edgeReport(made.dress(piece).mesh).closed).toBe(true);
  return made.joints;
}

describe('joints by section', () => {
  it('puts lips behind the wall of a 3 mm shell', async () => {
    const [joint] = await draw('shell', boxWithCavity(200, 194).mesh, level(100));
    expect(joint!.kind).toBe('backing-lip');
    // A circle in a corner of the shell is a little larger than one in its wall.
    expect(joint!.wallMm).toBeGreaterThan(2.9);
    expect(joint!.wallMm).toBeLessThan(3.6);
    expect(joint!.lips.length).toBeGreaterThanOrEqual(2);
    expect(joint!.reason).toMatch(/^\d lips? behind the wall, \d+ mm together: .* 3\.\d mm thick/);
  });

  it('pins a solid section of 40 mm with two printed pins, one round, one slotted', async () => {
    const [joint] = await draw('solid', box([0, 0, 0], [40, 40, 120]).mesh, level(61));
    expect(joint!.kind).toBe('loose-pin');
    expect(joint!.pins.map(({ fit }) => fit).slice(0, 2)).toEqual(['round', 'slotted']);
    const [first, second] = joint!.pins;
    expect(first!.diameterMm).toBeGreaterThanOrEqual(3);
    expect(Math.hypot(first!.x - second!.x, first!.y - second!.y)).toBeGreaterThan(15);
    // The slot points at the round one.
    const across =
      second!.reach.x * (second!.y - first!.y) - second!.reach.y * (second!.x - first!.x);
    expect(Math.abs(across)).toBeLessThan(1e-9);
  });

  it('pins a thick annulus all round, lopsided so that no turn fits', async () => {
    const [joint] = await draw('annulus', tube(60, 44, 120), level(61));
    expect(joint!.kind).toBe('loose-pin');
    expect(joint!.pins.length).toBeGreaterThanOrEqual(2);
    expect(joint!.notes).toEqual([]);
  });

  it('joins a section in two islands as the one seam that it is', async () => {
    // A staple: two legs and a bridge, cut through both legs.
    const staple = voxels('staple', [5, 2, 5], 20, (x, _, z) => z === 4 || x === 0 || x === 4).mesh;
    const joints = await draw('islands', staple, level(41));
    const pins = joints.flatMap((joint) => joint.pins);
    expect(joints.every(({ kind }) => kind === 'loose-pin')).toBe(true);
    expect(pins.length).toBeGreaterThanOrEqual(2);
    const [left, right] = [pins.filter(({ x }) => x < 50), pins.filter(({ x }) => x > 50)];
    expect(left.length).toBeGreaterThan(0);
    expect(right.length).toBeGreaterThan(0);
  });

  it('holds a strip of 6 mm with thin rods or thin pins along its middle', async () => {
    const [joint] = await draw('strip', box([0, 0, 0], [180, 6, 90]).mesh, level(46));
    expect(['stock-rod', 'loose-pin']).toContain(joint!.kind);
    for (const pin of joint!.pins) expect(pin.diameterMm).toBeLessThanOrEqual(3);
    expect(joint!.pins.length).toBeGreaterThanOrEqual(2);
    const xs = joint!.pins.map(({ x }) => x);
    expect(Math.max(...xs) - Math.min(...xs)).toBeGreaterThan(80);
  });

  it('says plainly where there is no room', async () => {
    const [joint] = await draw('wire', box([0, 0, 0], [2, 2, 90]).mesh, level(46));
    expect(joint!.kind).toBe('none');
    expect(joint!.notes.join()).toMatch(/no joint between them: hold them in place/);
  });
});
