import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { restingDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { convexHull3d, cornerPoints } from '../../shared/geometry/fitting/convex-hull-3d.js';
import { type BedPose, layOnBed } from '../../shared/geometry/fitting/lay-on-bed.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { outerVertices } from '../../shared/geometry/fitting/outer-vertices.js';

/** What the outer vertices alone are over by more than this, no closer look will make fit, mm. */
const CLEARLY_OVER_MM = 1;

/**
 * Whether and how a body fits one of the spaces, the first that holds it; when none does, the pose
 * that is over by least. By the same resting directions as `candidateDowns` but in no order
 * of preference. A large body is first judged by a selection of its vertices: when those are over,
 * so is the body; when they fit, all vertices are checked in that one pose before anything dearer.
 */
export function poseExactly(
  mesh: TriangleMesh,
  spaces: readonly BuildSpace[],
  outer = outerVertices(mesh.positions),
): BedPose & { readonly space: number } {
  const hull = convexHull3d(outer);
  const { standing, others } = restingDirections(mesh, outer, hull);
  const downs = [...standing, ...others];
  const corners = cornerPoints(outer, hull);
  let best: (BedPose & { space: number }) | null = null;
  for (const [k, space] of spaces.entries()) {
    const pose = { ...poseIn(mesh, space, outer, corners, downs), space: k };
    if (pose.fits) return pose;
    if (!best || pose.slackMm > best.slackMm) best = pose;
  }
  return best!;
}

function poseIn(
  mesh: TriangleMesh,
  space: BuildSpace,
  outer: Float64Array,
  corners: Float64Array,
  downs: readonly Vector3[],
): BedPose {
  const quick = layOnBed(corners, space, downs);
  if (outer === mesh.positions || quick.slackMm < -CLEARLY_OVER_MM) return quick;
  const same = layOnBed(mesh.positions, space, [quick.down]);
  return same.fits ? same : layOnBed(mesh.positions, space, downs);
}
