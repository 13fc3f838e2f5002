import { describe, expect, it } from 'vitest';
import { randomDirection, seededRandom } from '../../../test/support/random.js';
import { type Vector3 } from './plane.js';
import {
  applyMotion,
  composeMotions,
  identityMotion,
  invertMotion,
  type RigidMotion,
  rotationTaking,
} from './rigid-motion.js';

const SEED = 11;

function moved(motion: RigidMotion, point: Vector3): number[] {
  return [...applyMotion(motion, Float64Array.from(point))];
}

function randomMotion(random: () => number): RigidMotion {
  const shift = [1, 0, 0, 50 * random(), 0, 1, 0, -20 * random(), 0, 0, 1, 7 * random()];
  return composeMotions(shift, rotationTaking(randomDirection(random), randomDirection(random)));
}

describe(`rigid motions, seed ${SEED}`, () => {
  it('takes one direction to the other and keeps lengths and handedness', () => {
    const random = seededRandom(SEED);
    for (let round = 0; round < 200; round++) {
      const from = randomDirection(random);
      const nearlyOpposite = from.map((value) => -value + 1e-9 * random()) as [
        number,
        number,
        number,
      ];
      const to = round % 4 === 0 ? nearlyOpposite : randomDirection(random);
      const motion = rotationTaking(from, to);
      const length = Math.hypot(...to);
      moved(motion, from).forEach((value, k) => expect(value).toBeCloseTo(to[k]! / length, 12));
      const [a, b, c] = [motion.slice(0, 3), motion.slice(4, 7), motion.slice(8, 11)];
      const determinant =
        a[0]! * (b[1]! * c[2]! - b[2]! * c[1]!) -
        a[1]! * (b[0]! * c[2]! - b[2]! * c[0]!) +
        a[2]! * (b[0]! * c[1]! - b[1]! * c[0]!);
      expect(determinant).toBeCloseTo(1, 12);
    }
  });

  it('is exact for every pair of axis directions', () => {
    const axes = [0, 1, 2].flatMap((axis) =>
      [1, -1].map((sign) => [0, 1, 2].map((k) => (k === axis ? sign : 0)) as unknown as Vector3),
    );
    for (const from of axes) {
      for (const to of axes) {
        const motion = rotationTaking(from, to);
        expect(moved(motion, from).map((value) => value + 0)).toEqual(to.map((value) => value + 0));
        expect(motion.every((entry) => [-1, 0, 1].includes(entry))).toBe(true);
      }
    }
  });

  it('composes from right to left and inverts', () => {
    const random = seededRandom(SEED);
    for (let round = 0; round < 50; round++) {
      const [outer, inner] = [randomMotion(random), randomMotion(random)];
      const point: Vector3 = [random(), random(), random()];
      const inTurn = moved(outer, moved(inner, point) as unknown as Vector3);
      const both = composeMotions(outer, inner);
      moved(both, point).forEach((value, k) => expect(value).toBeCloseTo(inTurn[k]!, 12));
      const undone = composeMotions(invertMotion(both), both);
      undone.forEach((entry, k) => expect(entry).toBeCloseTo(identityMotion[k]!, 12));
    }
  });

  it('moves in place when the target is the source', () => {
    const points = Float64Array.of(1, 2, 3, 4, 5, 6);
    const motion = [0, -1, 0, 10, 1, 0, 0, 20, 0, 0, 1, 30];
    expect(applyMotion(motion, points, points)).toBe(points);
    expect([...points]).toEqual([8, 21, 33, 5, 24, 36]);
  });

  it('refuses a direction of no length', () => {
    expect(() => rotationTaking([0, 0, 0], [0, 0, 1])).toThrow(RangeError);
  });
});
