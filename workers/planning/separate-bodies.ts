import { cubeDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type PlanPart } from './plan-part.js';
import { rangeAlong } from './sweep-tables.js';

/** A gap narrower than this is not cut through, mm. */
const LEAST_GAP_MM = 0.2;

/**
 * A plane that parts the loose bodies of a part without touching any: it costs nothing and lets
 * each side be planned alone. The one in the widest gap along the cube's directions, or null.
 */
export function separatingPlane(part: PlanPart): Plane | null {
  if (part.bodies.length < 2) return null;
  let best: Plane | null = null;
  let widest = LEAST_GAP_MM;
  for (const normal of cubeDirections) {
    const [x, y, z] = normal;
    if (x < 0 || (x === 0 && (y < 0 || (y === 0 && z < 0)))) continue;
    const ranges = part.bodies
      .map((body) => rangeAlong(body.mesh.positions, normal))
      .sort((a, b) => a[0] - b[0]);
    let reached = ranges[0][1];
    for (const [low, high] of ranges) {
      if (low - reached > widest) {
        widest = low - reached;
        best = { normal, offset: (low + reached) / 2 };
      }
      if (high > reached) reached = high;
    }
  }
  return best;
}
