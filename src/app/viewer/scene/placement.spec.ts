import { Vector3 } from 'three';
import { identityPose, matrixOfPlacement, mixPoses, poseOfPlacement } from './placement';

// A quarter turn about z, then a move by (100, 20, 5).
const rows = [0, -1, 0, 100, 1, 0, 0, 20, 0, 0, 1, 5];

describe('placement', () => {
  it('maps points as the rows say: p → R p + t', () => {
    const point = new Vector3(3, 4, 6).applyMatrix4(matrixOfPlacement(rows));
    expect(point.toArray()).toEqual([100 - 4, 20 + 3, 5 + 6]);
  });

  it('splits into a pose that maps points alike', () => {
    const { position, rotation } = poseOfPlacement(rows);
    const point = new Vector3(3, 4, 6).applyQuaternion(rotation).add(position);
    const wanted = [96, 23, 11];
    point.toArray().forEach((value, axis) => expect(value).toBeCloseTo(wanted[axis]!, 12));
  });

  it('refuses anything but twelve numbers', () => {
    expect(() => matrixOfPlacement([1, 2, 3])).toThrow('12');
  });

  it('mixes from one pose to the other and keeps the turn a turn on the way', () => {
    const to = poseOfPlacement(rows);
    const target = identityPose();
    mixPoses(identityPose(), to, 1, target);
    expect(target.position.toArray()).toEqual([100, 20, 5]);
    mixPoses(identityPose(), to, 0.5, target);
    expect(target.rotation.length()).toBeCloseTo(1, 12);
    expect(target.rotation.angleTo(to.rotation)).toBeCloseTo(Math.PI / 4, 6);
  });
});
