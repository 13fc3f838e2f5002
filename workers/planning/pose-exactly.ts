import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { restingDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { convexHull3d, cornerPoints } from '../../shared/geometry/fitting/convex-hull-3d.js';
import { type BedPose, layOnBed } from '../../shared/geometry/fitting/lay-on-bed.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { outerVertices } from '../../shared/geometry/fitting/outer-vertices.js';

/** What the outer vertices alone are over by more than this, no closer look will make fit, mm. */
const CLEARLY_OVER_MM = 1;

/**
 * Whether and how a body fits, by the same resting directions as `candidateDowns` but in no order
 * of preference. A large body is first judged by a selection of its vertices: when those are over,
 * so is the body; when they fit, all vertices are checked in that one pose before anything dearer.
 */
export function poseExactly(
  mesh: TriangleMesh,
  space: BuildSpace,
  outer = outerVertices(mesh.positions),
): BedPose {
  const hull = convexHull3d(outer);
  const { standing, others } = restingDirections(mesh, outer, hull);
  const downs = [...standing, ...others];
  const quick = layOnBed(cornerPoints(outer, hull), space, downs);
  if (outer === mesh.positions || quick.slackMm < -CLEARLY_OVER_MM) return quick;
  const same = layOnBed(mesh.positions, space, [quick.down]);
  return same.fits ? same : layOnBed(mesh.positions, space, downs);
}
