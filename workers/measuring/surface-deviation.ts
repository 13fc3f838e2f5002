import { Vector3 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { Deviation } from '../../shared/jobs/model-inspect.js';
import { sampleSurface } from './surface-samples.js';

const usualSamples = 20_000;

/** A measured deviation with the sampled point that lies farthest off. */
export interface MeasuredDeviation extends Deviation {
  readonly farthestAt: readonly [number, number, number];
}

/**
 * How far the points of one surface lie from another one: unsigned distances from samples of `from` to
 * the nearest point of the tree's triangles. One-sided: measure both ways where either may lack
 * something. `max` is the largest found, not a bound. Null when `from` has no area.
 */
export function surfaceDeviation(
  from: TriangleMesh,
  to: MeshBVH,
  samples: number = usualSamples,
): MeasuredDeviation | null {
  const { count, points } = sampleSurface(from, samples);
  if (count === 0) return null;
  const distances = new Float64Array(count);
  const point = new Vector3();
  const target = { point: new Vector3(), distance: 0, faceIndex: 0 };
  let farthest = 0;
  let sum = 0;
  for (let i = 0; i < count; i++) {
    point.set(points[3 * i], points[3 * i + 1], points[3 * i + 2]);
    const distance = to.closestPointToPoint(point, target)?.distance ?? Infinity;
    distances[i] = distance;
    sum += distance;
    if (distance > distances[farthest]) farthest = i;
  }
  const farthestAt = [0, 1, 2].map((axis) => points[3 * farthest + axis]) as unknown as [
    number,
    number,
    number,
  ];
  const max = distances[farthest];
  distances.sort();
  const p95 = distances[Math.min(count - 1, Math.ceil(0.95 * count) - 1)];
  return { mean: sum / count, p95, max, samples: count, farthestAt };
}
