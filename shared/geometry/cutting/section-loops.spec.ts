import { describe, expect, it } from 'vitest';
import { box, boxWithCavity, sphere } from '../../../test/support/shapes.js';
import { seamPlane } from '../sections/seam-plane.js';
import { type Vector3 } from '../vectors/plane.js';
import { loopArea } from './section-cap.js';
import { sectionLoops } from './section-loops.js';

const up: Vector3 = [0, 0, 1];
const at = (offset: number) => seamPlane({ normal: up, offset }, [0, 0, offset]);
const area = (loops: readonly Float64Array[]) =>
  loops.reduce((sum, loop) => sum + loopArea(loop), 0);

describe('sectionLoops', () => {
  it('cuts a box, a box with a hollow and a ball at their known areas', () => {
    expect(area(sectionLoops(box([0, 0, 0], [10, 20, 30]).mesh, at(5), up, 3))).toBeCloseTo(200, 9);
    expect(area(sectionLoops(boxWithCavity(10, 4).mesh, at(2), up, 3))).toBeCloseTo(100 - 16, 9);
    const ball = area(sectionLoops(sphere(50, 256, 256).mesh, at(0), up, 30));
    expect(Math.abs(ball / (Math.PI * 40 ** 2) - 1)).toBeLessThan(1e-3);
  });

  it('is empty beyond the body', () => {
    expect(sectionLoops(box([0, 0, 0], [10, 20, 30]).mesh, at(5), up, 30)).toEqual([]);
  });
});
