import { Matrix4, Quaternion, Vector3 } from 'three';

/** A rigid pose: what the scene interpolates between. */
export interface Pose {
  readonly position: Vector3;
  readonly rotation: Quaternion;
}

export function identityPose(): Pose {
  return { position: new Vector3(), rotation: new Quaternion() };
}

/**
 * The pose of a placement.
 * @param rows 12 numbers, rows of the 3×4 matrix [R|t] that takes the assembled model to the bed
 */
export function poseOfPlacement(rows: readonly number[]): Pose {
  const position = new Vector3();
  const rotation = new Quaternion();
  matrixOfPlacement(rows).decompose(position, rotation, new Vector3());
  return { position, rotation };
}

type TwelveNumbers = readonly [
  ...[number, number, number, number],
  ...[number, number, number, number],
  ...[number, number, number, number],
];

/** Twelve numbers in rows as the 4×4 matrix of the scene. */
export function matrixOfPlacement(rows: readonly number[]): Matrix4 {
  if (rows.length !== 12) throw new Error(`A placement has 12 numbers, not ${rows.length}`);
  const [a, b, c, x, d, e, f, y, g, h, i, z] = rows as TwelveNumbers;
  // Matrix4.set takes its arguments in rows, whatever order it stores them in.
  return new Matrix4().set(a, b, c, x, d, e, f, y, g, h, i, z, 0, 0, 0, 1);
}

/** Writes the pose a fraction of the way from one pose to another into `target`. */
export function mixPoses(from: Pose, to: Pose, fraction: number, target: Pose): void {
  target.position.lerpVectors(from.position, to.position, fraction);
  target.rotation.slerpQuaternions(from.rotation, to.rotation, fraction);
}
