import { describe, expect, it } from 'vitest';
import { applyTree, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { candidateDowns } from '../../shared/geometry/fitting/candidate-downs.js';
import { layOnBed } from '../../shared/geometry/fitting/lay-on-bed.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { applyMotion } from '../../shared/geometry/vectors/rigid-motion.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { box, torusKnot } from '../../test/support/shapes.js';
import { AbortError } from '../runtime/cancellation.js';
import { silentContext } from '../runtime/job-context.js';
import { loadSolids } from '../solids/solid-kernel.js';
import {
  type CutBodies,
  FARTHEST_RECUT_MM,
  finishBodies,
  type Outfitter,
} from './finish-bodies.js';

const bed: BuildSpace = { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 };
const leaf: PlaneTree = { kind: 'leaf' };
const versionOf = (mesh: TriangleMesh, note = '') => ({
  mesh,
  pose: layOnBed(mesh.positions, bed, candidateDowns(mesh)),
  featuresMm3: 0,
  bevelMm3: 0,
  notes: [note],
});
/** Plain pieces, laid as the fitting finds them. */
const plainly: Outfitter<null> = async (bodies) => ({
  outfits: bodies.map(({ body: { mesh } }) => ({
    space: 0,
    versions: [() => versionOf(mesh)],
  })),
  common: null,
});
const neverRecut = () => {
  throw new Error('No recut was expected.');
};
/** A cube that float32 cannot hold anywhere but at the origin. */
const crumb = (tag: number) => ({
  mesh: { ...box([0, 0, 0], [1e-9, 1e-9, 1e-9]).mesh, tags: new Int32Array(12).fill(tag) },
  path: 'a',
});

describe('finishBodies', () => {
  it('lays cut pieces on the bed closed, whole, inside, with their volume, named bottom to top', async () => {
    const { triangulate } = await loadSolids();
    const mesh = torusKnot(60.01, 23.7, 300, 24);
    const tree: PlaneTree = {
      kind: 'cut',
      plane: { normal: [0, 0, 1], offset: 1.2345 },
      above: {
        kind: 'cut',
        plane: { normal: [0.6, 0.8, 0], offset: 3.21 },
        above: leaf,
        below: leaf,
      },
      below: { kind: 'cut', plane: { normal: [1, 0, 0], offset: -2.5 }, above: leaf, below: leaf },
    };
    const cut = applyTree(mesh, tree, { triangulate, toleranceMm: 0.02 });
    const { pieces, failures, offsets } = await finishBodies(
      cut,
      [bed],
      { outfit: plainly, recut: neverRecut },
      silentContext,
    );
    expect(failures).toEqual([]);
    expect(offsets).toBe(cut.offsets);
    expect(pieces.length).toBe(cut.bodies.length);
    expect(pieces.length).toBeGreaterThan(4);
    for (const [index, piece] of pieces.entries()) {
      expect(piece.name).toBe(`P${String(index + 1).padStart(2, '0')}`);
      expect(piece.rounded.report.closed).toBe(true);
      const { min, max } = boundingBox(piece.rounded.positions);
      expect(min[2]).toBe(0);
      expect(Math.min(min[0], min[1])).toBeGreaterThanOrEqual(0);
      if (piece.fits) expect(max[0] <= 220 && max[1] <= 220 && max[2] <= 250).toBe(true);
      const rounded = signedVolume({
        positions: Float64Array.from(piece.rounded.positions),
        indices: piece.rounded.indices,
      });
      expect(Math.abs(rounded / signedVolume(piece.body.mesh) - 1)).toBeLessThan(5e-7);
      // The placement is the motion that really took the body to the bed.
      const moved = boundingBox(applyMotion(piece.motion, piece.body.mesh.positions));
      for (let k = 0; k < 3; k++) {
        expect(Math.abs(moved.min[k] - min[k])).toBeLessThan(1e-4);
        expect(Math.abs(moved.max[k] - max[k])).toBeLessThan(1e-4);
      }
      if (index > 0)
        expect(Math.round(piece.centreMm[2])).toBeGreaterThanOrEqual(
          Math.round(pieces[index - 1].centreMm[2]),
        );
    }
  });

  it('keeps a piece that fills the build space exactly inside it', async () => {
    const bodies = [{ mesh: box([5, 5, 5], [225, 225, 255]).mesh, path: '' }];
    const { pieces } = await finishBodies(
      { bodies, offsets: [] },
      [bed],
      { outfit: plainly, recut: neverRecut },
      silentContext,
    );
    expect(boundingBox(pieces[0].rounded.positions)).toEqual({
      min: [0, 0, 0],
      max: [220, 220, 250],
      size: [220, 220, 250],
    });
  });

  it('cuts again, a little beside, when a piece does not survive rounding', async () => {
    const asked: (readonly number[])[] = [];
    const sound = { mesh: box([0, 0, 0], [10, 10, 10]).mesh, path: 'a' };
    const recut = (offsets: readonly number[]): CutBodies => {
      asked.push(offsets);
      return { bodies: asked.length < 2 ? [crumb(2)] : [sound], offsets };
    };
    const cut = { bodies: [crumb(2)], offsets: [10, 20, 30] };
    const result = await finishBodies(cut, [bed], { outfit: plainly, recut }, silentContext);
    expect(result.failures).toEqual([]);
    expect(result.offsets).toBe(asked[1]);
    // Only the cut that bounds the unsound piece moves, another way each time, never too far.
    for (const offsets of asked) {
      expect([offsets[0], offsets[2]]).toEqual([10, 30]);
      expect(Math.abs(offsets[1] - 20)).toBeGreaterThan(0);
      expect(Math.abs(offsets[1] - 20)).toBeLessThanOrEqual(FARTHEST_RECUT_MM * (1 + 1e-12));
    }
    expect(asked[0]).not.toEqual(asked[1]);
  });

  it('says in a sentence which piece could not be made sound, and keeps the first cut', async () => {
    const cut = { bodies: [crumb(1)], offsets: [7] };
    const recut = (offsets: readonly number[]) => ({ bodies: [crumb(1)], offsets });
    const result = await finishBodies(cut, [bed], { outfit: plainly, recut }, silentContext);
    expect(result.offsets).toBe(cut.offsets);
    expect(result.failures).toEqual([
      expect.stringMatching(/^P01 cannot be written soundly: nothing is left of it .*\.$/),
    ]);
    const uncut = { bodies: [crumb(0)], offsets: [] };
    const found = await finishBodies(
      uncut,
      [bed],
      { outfit: plainly, recut: neverRecut },
      silentContext,
    );
    expect(found.failures).toHaveLength(1);
  });

  it('stops between pieces when the job is cancelled', async () => {
    const body = { mesh: box([0, 0, 0], [1, 1, 1]).mesh, path: '' };
    let polls = 0;
    const context = {
      progress: () => {},
      throwIfCancelled: () => {
        if (++polls === 2) throw new AbortError();
      },
    };
    const cut = { bodies: [body, body, body], offsets: [] };
    const finishing = finishBodies(cut, [bed], { outfit: plainly, recut: neverRecut }, context);
    await expect(finishing).rejects.toThrow(AbortError);
  });

  it('takes a simpler version of a piece when the fullest cannot be written soundly', async () => {
    const sound = box([0, 0, 0], [10, 10, 10]).mesh;
    const outfit: Outfitter<null> = async (bodies, offsets) => {
      const plain = await plainly(bodies, offsets);
      const versions = [() => versionOf(crumb(1).mesh, 'full'), () => versionOf(sound, 'simple')];
      return { ...plain, outfits: plain.outfits.map((one) => ({ ...one, versions })) };
    };
    const cut = { bodies: [{ mesh: sound, path: '' }], offsets: [] };
    const { pieces, failures } = await finishBodies(
      cut,
      [bed],
      { outfit, recut: neverRecut },
      silentContext,
    );
    expect(failures).toEqual([]);
    expect(pieces[0]!.version.notes).toEqual(['simple']);
  });
});
