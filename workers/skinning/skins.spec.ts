import { beforeAll, describe, expect, it } from 'vitest';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { columnSupport } from '../../shared/geometry/support/column-support.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { box, voxels } from '../../test/support/shapes.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { addSkins } from './add-skins.js';
import { findSkins } from './find-skins.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});
const up: Vector3 = [0, 0, 1];
const task = { overhangDegrees: 45, bridgeMm: 5, skinMm: 0.6 };

/** A wall 3 mm thick, 100 long and 80 high with a window 40 × 50 on a sill of 10 mm. */
const windowed = () =>
  voxels(
    'wall with a window',
    [100, 3, 80],
    1,
    (x, _y, z) => !(x >= 30 && x < 70 && z >= 10 && z < 60),
  ).mesh;

describe('skins', () => {
  it('close a window in a thin wall and take the place of its support', () => {
    const mesh = windowed();
    const skins = findSkins(solids, mesh, up, task);
    expect(skins).toHaveLength(1);
    const [skin] = skins;
    expect(skin!.wallMm).toBeCloseTo(3, 1);
    expect(Math.abs(skin!.lengthMm - 40)).toBeLessThan(2);
    expect([skin!.footMm, skin!.headMm]).toEqual([10, 60]);
    const made = addSkins(solids, mesh, up, skins, { skinMm: 0.6, plateMm: 0 });
    expect(edgeReport(made.mesh).closed).toBe(true);
    // A wall of 0.6 mm over the window, its ends drawn in by half of what the wall is thicker.
    expect(made.addedMm3).toBeGreaterThan(0.6 * 50 * (40 - 2.6));
    expect(made.addedMm3).toBeLessThan(0.68 * 50 * 40);
    expect(signedVolume(made.mesh) - signedVolume(mesh)).toBeCloseTo(made.addedMm3, 6);
    expect(made.notes.join()).toMatch(
      /^Skin of 0\.6 mm across an opening of 4\d × 50 mm: cut out after printing, blade away/,
    );
    const before = columnSupport({ mesh, up, pitchMm: 0.5, overhangDegrees: 45 });
    expect(before.volumeMm3 / (40 * 3 * 50)).toBeCloseTo(1, 1);
    // Strips of 1.2 mm on both sides of the skin are bridges from wall to skin at most.
    const after = columnSupport({
      mesh: made.mesh,
      up,
      pitchMm: 0.2,
      overhangDegrees: 45,
      bridgeMm: 5,
    });
    expect(after.volumeMm3).toBeLessThan(before.volumeMm3);
  });

  it('are not offered where support is no sheet, or none is needed', () => {
    const tee = voxels('tee', [5, 1, 4], 20, (x, _y, z) => z === 3 || x === 2).mesh;
    expect(findSkins(solids, tee, up, task)).toEqual([]);
    expect(findSkins(solids, box([0, 0, 0], [30, 30, 30]).mesh, up, task)).toEqual([]);
  });

  it('leave a piece without openings alone', () => {
    const { mesh } = box([0, 0, 0], [30, 30, 30]);
    expect(addSkins(solids, mesh, up, [], { skinMm: 0.6, plateMm: 0 }).mesh).toBe(mesh);
  });
});
