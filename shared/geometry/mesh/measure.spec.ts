import { describe, expect, it } from 'vitest';
import * as shapes from '../../../test/support/shapes.js';
import { applyMotion } from '../vectors/rigid-motion.js';
import { boundingBox, scaleMesh, signedVolume, surfaceArea } from './measure.js';

const empty = { positions: new Float64Array(0), indices: new Uint32Array(0) };

describe('measures', () => {
  it('measures a box exactly', () => {
    const { mesh } = shapes.box([1, 2, 3], [11, 22, 33]);
    expect(signedVolume(mesh)).toBe(6000);
    expect(surfaceArea(mesh)).toBe(2 * (200 + 300 + 600));
    expect(boundingBox(mesh.positions)).toEqual({
      min: [1, 2, 3],
      max: [11, 22, 33],
      size: [10, 20, 30],
    });
  });

  it('gives a body turned inside out a negative volume', () => {
    expect(signedVolume(shapes.turnInsideOut(shapes.box([0, 0, 0], [1, 1, 1]).mesh))).toBe(-1);
  });

  it('keeps its digits far from the origin', () => {
    const { mesh, volumeMm3 } = shapes.sphere(50, 48, 32);
    const away = [1, 0, 0, 1e6, 0, 1, 0, -2e6, 0, 0, 1, 3e6];
    const far = { ...mesh, positions: applyMotion(away, mesh.positions) };
    // Rounding of the coordinates themselves is 2^-32 mm there, the radius 50 mm.
    expect(signedVolume(far) / volumeMm3).toBeCloseTo(1, 9);
  });

  it('approaches the handbook sphere from below as it is tessellated finer', () => {
    const exact = (4 / 3) * Math.PI * 50 ** 3;
    const errors = [16, 32, 64].map(
      (n) => 1 - signedVolume(shapes.sphere(50, 2 * n, n).mesh) / exact,
    );
    expect(errors.every((error) => error > 0)).toBe(true);
    expect(errors[0]! / errors[1]!).toBeCloseTo(4, 1);
    expect(errors[1]! / errors[2]!).toBeCloseTo(4, 1);
  });

  it('scales volumes by the cube of the factor and leaves the source alone', () => {
    const { mesh } = shapes.box([0, 0, 0], [1, 2, 3]);
    expect(signedVolume(scaleMesh(mesh, 25.4))).toBeCloseTo(6 * 25.4 ** 3, 8);
    expect(signedVolume(mesh)).toBe(6);
  });

  it('measures nothing as nothing', () => {
    expect(signedVolume(empty)).toBe(0);
    expect(surfaceArea(empty)).toBe(0);
    expect(boundingBox(empty.positions).size).toEqual([0, 0, 0]);
  });
});
