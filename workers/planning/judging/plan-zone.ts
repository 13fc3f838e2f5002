import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../../shared/geometry/vectors/plane.js';
import { type Zone } from '../../../shared/jobs/plan-wishes.js';
import { JobRefusal } from '../../runtime/job-refusal.js';
import { rangeAlong } from '../sweep-tables.js';

/** A region of the object, ready to be asked. */
export interface PlanZone {
  readonly name: string;
  /** Least and greatest projection on a unit direction, mm. */
  readonly range: (direction: Vector3) => readonly [number, number];
  readonly holds: (x: number, y: number, z: number) => boolean;
}

/** Points this near to a painted triangle's corner belong to it, share of the painted box. */
const PAINT_REACH = 0.02;

/**
 * @param solid the exact solid, whose triangles painted zones name
 * Throws a JobRefusal for a triangle that does not exist and for a box without extent.
 */
export function planZone(zone: Zone, solid: TriangleMesh): PlanZone {
  const { name } = zone;
  switch (zone.shape) {
    case 'sphere': {
      const [cx, cy, cz] = zone.centre;
      const r = zone.radiusMm;
      return {
        name,
        range: ([x, y, z]) => {
          const middle = x * cx + y * cy + z * cz;
          return [middle - r, middle + r];
        },
        holds: (x, y, z) => (x - cx) ** 2 + (y - cy) ** 2 + (z - cz) ** 2 <= r * r,
      };
    }
    case 'box': {
      const low = zone.min.map((at, axis) => Math.min(at, zone.max[axis]));
      const high = zone.min.map((at, axis) => Math.max(at, zone.max[axis]));
      if (low.some((at, axis) => !(high[axis] > at)))
        throw new JobRefusal(`The zone “${name}” has no extent in one direction.`);
      return {
        name,
        range: (direction) => {
          let least = 0;
          let most = 0;
          for (let axis = 0; axis < 3; axis++) {
            const [a, b] = [direction[axis] * low[axis], direction[axis] * high[axis]];
            least += Math.min(a, b);
            most += Math.max(a, b);
          }
          return [least, most];
        },
        holds: (x, y, z) =>
          x >= low[0] && x <= high[0] && y >= low[1] && y <= high[1] && z >= low[2] && z <= high[2],
      };
    }
    case 'facets':
      return paintedZone(name, zone.facets, solid);
  }
}

function paintedZone(name: string, facets: readonly number[], solid: TriangleMesh): PlanZone {
  const count = solid.indices.length / 3;
  const points = new Float64Array(9 * facets.length);
  facets.forEach((facet, k) => {
    if (facet >= count)
      throw new JobRefusal(
        `The zone “${name}” names facet ${facet}, and the model has ${count}: it was painted on another revision.`,
      );
    for (let corner = 0; corner < 3; corner++) {
      const from = 3 * solid.indices[3 * facet + corner];
      points.set(solid.positions.subarray(from, from + 3), 9 * k + 3 * corner);
    }
  });
  const axes: Vector3[] = [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ];
  const box = axes.map((axis) => rangeAlong(points, axis));
  const reach = PAINT_REACH * Math.hypot(...box.map(([low, high]) => high - low));
  return {
    name,
    range: (direction) => rangeAlong(points, direction),
    holds: (x, y, z) => {
      const p = [x, y, z];
      if (box.some(([low, high], axis) => p[axis] < low - reach || p[axis] > high + reach))
        return false;
      for (let k = 0; k < points.length; k += 3)
        if (Math.hypot(points[k] - x, points[k + 1] - y, points[k + 2] - z) <= reach) return true;
      return false;
    },
  };
}

/** How near a cut may come to a zone, mm: beyond what placing it can move it. */
export const ZONE_CLEARANCE_MM = 0.1;

/** Whether a plane keeps clear of a zone, and on which side the zone then lies. */
export function sideOfZone(zone: PlanZone, { normal, offset }: Plane): 'above' | 'below' | 'cut' {
  const [low, high] = zone.range(normal);
  if (low >= offset + ZONE_CLEARANCE_MM) return 'above';
  if (high <= offset - ZONE_CLEARANCE_MM) return 'below';
  return 'cut';
}

/** The zones on either side of a plane; null when it crosses one. */
export function partZones(
  zones: readonly PlanZone[],
  plane: Plane,
): { above: readonly PlanZone[]; below: readonly PlanZone[] } | null {
  if (zones.length === 0) return { above: zones, below: zones };
  const above: PlanZone[] = [];
  const below: PlanZone[] = [];
  for (const zone of zones) {
    const side = sideOfZone(zone, plane);
    if (side === 'cut') return null;
    (side === 'above' ? above : below).push(zone);
  }
  return { above, below };
}
