import { DoubleSide, Matrix4, Ray, Vector3, type Camera } from 'three';
import { type PieceBody } from './piece-body';

/** Points of a piece that a leader line may end on, in the piece's own frame. */
const SAMPLES = 14;
/** A ray towards the eye starts this share of the piece's size off the surface. */
const START_SHARE = 1e-3;

export interface FoundAnchor {
  /** In the piece's own frame. */
  readonly point: Vector3;
  /** Whether something lies between it and the eye from every point that was tried. */
  readonly isHidden: boolean;
}

const ray = new Ray();
const localRay = new Ray();
const inverse = new Matrix4();
const world = new Vector3();

/**
 * Where the leader line of a piece ends: of its sample points the one nearest to the middle of the
 * piece on the screen that nothing hides. When all are hidden, the one nearest to the middle.
 * @param others every body that may hide it, the piece itself among them
 */
export function findAnchor(
  body: PieceBody,
  others: readonly PieceBody[],
  camera: Camera,
  samples: readonly Vector3[],
): FoundAnchor {
  const towardsEye = camera.getWorldDirection(new Vector3()).negate();
  const middle = body.mesh.geometry.boundingBox!.getCenter(new Vector3());
  const startMm = body.mesh.geometry.boundingSphere!.radius * START_SHARE;
  const screenDistance = (point: Vector3) => {
    const across = world.copy(point).sub(middle).applyQuaternion(body.group.quaternion);
    return across.addScaledVector(towardsEye, -across.dot(towardsEye)).lengthSq();
  };
  const nearestFirst = [...samples].sort((a, b) => screenDistance(a) - screenDistance(b));
  for (const point of nearestFirst) {
    ray.direction.copy(towardsEye);
    ray.origin.copy(point).applyMatrix4(body.group.matrixWorld);
    ray.origin.addScaledVector(towardsEye, startMm);
    if (!others.some((other) => other.isShown && blocks(other))) return { point, isHidden: false };
  }
  return { point: nearestFirst[0] ?? middle, isHidden: true };
}

/** Whether a body lies on the current ray. */
function blocks(body: PieceBody): boolean {
  const sphere = body.mesh.geometry.boundingSphere!;
  world.copy(sphere.center).applyMatrix4(body.group.matrixWorld);
  if (ray.distanceSqToPoint(world) > sphere.radius * sphere.radius) return false;
  inverse.copy(body.group.matrixWorld).invert();
  localRay.copy(ray).applyMatrix4(inverse);
  if (!localRay.intersectsBox(body.mesh.geometry.boundingBox!)) return false;
  return body.bounds.raycastFirst(localRay, DoubleSide) !== null;
}

/** Points spread over a piece's surface, the one nearest to its middle first. */
export function samplePoints(body: PieceBody): Vector3[] {
  const points = [body.nearestToCentre(new Vector3())];
  const position = body.mesh.geometry.getAttribute('position');
  const triangles = position.count / 3;
  const stride = Math.max(1, Math.floor(triangles / SAMPLES));
  const corner = new Vector3();
  for (let triangle = 0; triangle < triangles; triangle += stride) {
    const centroid = new Vector3();
    for (let at = 0; at < 3; at++)
      centroid.addScaledVector(corner.fromBufferAttribute(position, triangle * 3 + at), 1 / 3);
    points.push(centroid);
  }
  return points;
}
