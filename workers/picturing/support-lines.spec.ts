import { describe, expect, it } from 'vitest';
import { box, join } from '../../test/support/shapes.js';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import { type Piece } from '../../shared/jobs/plan-make.js';
import { supportLines } from './support-lines.js';

/** A T: the arms hang 60 mm over the plate. */
const tee = join([box([-10, -10, 0], [10, 10, 60]).mesh, box([-50, -10, 60], [50, 10, 80]).mesh]);
const lying = (down: [number, number, number], supportMm3: number) =>
  ({ name: 'P07', orientations: [{ down, supportMm3 }] }) as unknown as Piece;

describe('supportLines', () => {
  it('stand under the arms of a T, from the plate to the arms', () => {
    const [lines] = supportLines(lying([0, 0, -1], 96_000), tee, usualMaterial);
    expect(lines!.name).toBe('support-P07');
    const { positions } = lines!;
    expect(positions.length).toBeGreaterThan(6 * 50);
    for (let k = 0; k < positions.length; k += 6) {
      expect(Math.abs(positions[k]!)).toBeGreaterThan(10);
      expect([positions[k + 2], positions[k + 5]]).toEqual([0, 60]);
    }
  });

  it('are none for a piece that needs none', () => {
    expect(supportLines(lying([0, 0, 1], 0), tee, usualMaterial)).toEqual([]);
  });
});
