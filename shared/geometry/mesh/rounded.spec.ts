import { describe, expect, it } from 'vitest';
import * as shapes from '../../../test/support/shapes.js';
import { identityMotion } from '../vectors/rigid-motion.js';
import { signedVolume } from './measure.js';
import { roundAndWeld } from './rounded.js';
import { weldTriangles } from './weld.js';

describe('rounding to single precision', () => {
  it('gives the mesh that a reader of the written corners finds', () => {
    const { mesh } = shapes.sphere(50, 40, 24);
    const rounded = roundAndWeld(mesh, [1, 0, 0, 1234.5, 0, 1, 0, 0, 0, 0, 1, 0.1]);
    const asDouble = { ...rounded, positions: Float64Array.from(rounded.positions) };
    const read = weldTriangles(shapes.toSoup(asDouble)).mesh;
    expect(read.indices.length).toBe(rounded.indices.length);
    expect(read.positions.length).toBe(rounded.positions.length);
    expect(rounded.report.closed).toBe(true);
  });

  it('drops what collapses and stays closed', () => {
    // At 1e6 mm the step of float32 is 1/16 mm, so the rings of a fine sphere's poles fall together.
    const { mesh, volumeMm3 } = shapes.sphere(0.5, 200, 100);
    const tags = new Int32Array(mesh.indices.length / 3).fill(3);
    const away = [1, 0, 0, 1e6, 0, 1, 0, 1e6, 0, 0, 1, 1e6];
    const rounded = roundAndWeld({ ...mesh, tags }, away);
    expect(rounded.indices.length).toBeLessThan(mesh.indices.length / 10);
    expect(rounded.tags.length).toBe(rounded.indices.length / 3);
    expect(rounded.tags.every((tag) => tag === 3)).toBe(true);
    expect(new Set(rounded.indices).size).toBe(rounded.positions.length / 3);
    const volume = signedVolume({ ...rounded, positions: Float64Array.from(rounded.positions) });
    expect(Math.abs(volume / volumeMm3 - 1)).toBeLessThan(0.2);
  });

  it('drops a solid that became flat altogether', () => {
    const { mesh } = shapes.box([0, 0, 0], [1, 1, 1e-9]);
    const rounded = roundAndWeld(mesh, [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 100]);
    expect(rounded.indices.length).toBe(0);
    expect(rounded.positions.length).toBe(0);
    expect(rounded.report.closed).toBe(true);
  });

  it('reports a surface that rounding pinched', () => {
    // Two cubes 1e-9 mm apart share an edge once rounded: four triangles meet there.
    const mesh = shapes.join([
      shapes.box([0, 0, 0], [100, 100, 100]).mesh,
      shapes.box([100 + 1e-9, 100, 0], [200, 200, 100]).mesh,
    ]);
    expect(roundAndWeld(mesh, identityMotion).report).toMatchObject({
      closed: false,
      nonManifoldEdges: 1,
    });
  });
});
