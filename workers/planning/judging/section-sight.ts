import { type Plane } from '../../../shared/geometry/vectors/plane.js';
import { bodyFaces } from '../body-faces.js';
import { type PlanPart } from '../plan-part.js';
import { type SearchSpace } from '../search-space.js';

/** Length of a plane's seam on a part's surface, by the worth of the surface, mm. */
export function sectionSight(
  part: PlanPart,
  { normal, offset }: Plane,
  { worth }: SearchSpace,
): number {
  const [x, y, z] = normal;
  let sight = 0;
  for (const { mesh } of part.bodies) {
    const { corners, worth: worths } = bodyFaces(mesh, worth);
    for (let t = 0, c = 0; t < worths.length; t++, c += 9) {
      if (worths[t] === 0) continue;
      const heights = [0, 3, 6].map(
        (k) => x * corners[c + k] + y * corners[c + k + 1] + z * corners[c + k + 2] - offset,
      );
      const ends: number[] = [];
      for (let corner = 0; corner < 3; corner++) {
        const next = (corner + 1) % 3;
        if (heights[corner] >= 0 === heights[next] >= 0) continue;
        const share = heights[corner] / (heights[corner] - heights[next]);
        for (let axis = 0; axis < 3; axis++) {
          const from = corners[c + 3 * corner + axis];
          ends.push(from + share * (corners[c + 3 * next + axis] - from));
        }
      }
      if (ends.length === 6)
        sight += worths[t] * Math.hypot(ends[3] - ends[0], ends[4] - ends[1], ends[5] - ends[2]);
    }
  }
  return sight;
}
