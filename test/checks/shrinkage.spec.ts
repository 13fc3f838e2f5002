import { describe, expect, it } from 'vitest';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { usualJoints } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile, usualMaterial } from '../../shared/jobs/material-profile.js';
import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { makePieces } from '../../workers/building/make-pieces.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import { loadSolids } from '../../workers/solids/solid-kernel.js';
import { box } from '../support/shapes.js';
import { measureBinaryStl } from '../support/written-pieces.js';

const bed: BuildSpace = { shape: 'rectangular', widthMm: 101, depthMm: 101, heightMm: 101 };

async function made(material: MaterialProfile) {
  const store = new Map<string, Uint8Array>();
  const { plan } = await makePieces(
    {
      mesh: box([0, 0, 0], [180, 60, 40]).mesh,
      modelName: 'beam',
      millimetresPerUnit: 1,
      spaces: [bed],
      wishes: usualWishes,
      joints: usualJoints,
      material,
      orientations: [],
      seed: 1,
      tree: null,
      effort: 0.1,
    },
    {
      solids: await loadSolids(),
      files: {
        write: async (name, bytes) => void store.set(name, bytes),
        read: async (name) => store.get(name)!,
      },
      context: silentContext,
    },
  );
  const sizes = plan.pieces.map(({ file }) => measureBinaryStl(store.get(file)!));
  const manifest = JSON.parse(new TextDecoder().decode(store.get('manifest.json')));
  return { plan, sizes, manifest };
}

describe('shrinkage', { timeout: 120_000 }, () => {
  it('makes written pieces larger by 1/(1 − s) so that they have their size when cold', async () => {
    // 2 % of linear shrinkage, more than any of the usual materials has.
    const shrinking = { ...usualMaterial, shrinkagePercent: 2, isShrinkageApplied: true };
    const [plain, grown] = [await made(usualMaterial), await made(shrinking)];
    const factor = 1 / 0.98;
    expect(plain.manifest.piecesEnlargedBy).toBe(1);
    expect(grown.manifest.piecesEnlargedBy).toBeCloseTo(factor, 12);
    expect(grown.plan.proof.filter((row) => !row.passed)).toEqual([]);
    for (const { size } of grown.sizes)
      for (const side of size) expect(side).toBeLessThanOrEqual(101 + 1e-3);
    // Cold again they are the beam: 180 mm, 60 and 40, less what joints and bevels take.
    const volume = (all: typeof plain) => all.sizes.reduce((sum, one) => sum + one.volumeMm3, 0);
    expect(volume(grown) / factor ** 3 / (180 * 60 * 40)).toBeGreaterThan(0.98);
    expect(volume(grown) / factor ** 3 / (180 * 60 * 40)).toBeLessThan(1);
    const widest = (all: typeof plain) =>
      all.sizes.map(({ size }) => [...size].sort((a, b) => a - b)[1]);
    for (const side of widest(grown)) expect(side! / factor).toBeCloseTo(60, 3);
    for (const side of widest(plain)) expect(side).toBeCloseTo(60, 3);
  });

  it('is only told, not made up for, unless it is asked for', async () => {
    const { manifest } = await made({ ...usualMaterial, shrinkagePercent: 2 });
    expect(manifest.piecesEnlargedBy).toBe(1);
    expect(manifest.recipe.material.shrinkagePercent).toBe(2);
  });
});
