import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { Vector3 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { type MeasuredDeviation } from '../../measuring/surface-deviation.js';
import { sampleSurface } from '../../measuring/surface-samples.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import type { JobContext } from '../../runtime/job-context.js';
import type { PatchedCells } from './patch-cells.js';

const sampleCount = 20_000;
const reportEvery = 1 << 9;

/** Whether a point of the original, with the normal there, lies within the solid. */
export type BuriedTest = (points: Float64Array, at: number, normal: Float64Array) => boolean;

/**
 * How far original and rebuilt surface lie apart, both ways: mean, 95th percentile and maximum are the
 * larger of the two. Facets of the original that ended inside the solid are no part of its surface and
 * do not count; nor do patches of the result across holes, which have no original.
 */
export function measureRemesh(
  original: TriangleMesh,
  { mesh, isAcross }: PatchedCells,
  { isBuried, context }: { readonly isBuried: BuriedTest; readonly context: JobContext },
): MeasuredDeviation {
  context.progress('Measuring the deviation', 0);
  const there = distances(samplesOf(original, isBuried), buildBvh(mesh), (share) =>
    context.progress('Measuring the deviation', 0.3 + 0.3 * share),
  );
  const onFacets = mesh.indices.filter((_, i) => {
    const first = i - (i % 3);
    return (
      isAcross[mesh.indices[first]] +
        isAcross[mesh.indices[first + 1]] +
        isAcross[mesh.indices[first + 2]] ===
      0
    );
  });
  const { points } = sampleSurface({ positions: mesh.positions, indices: onFacets }, sampleCount);
  context.progress('Measuring the deviation', 0.6);
  const back = distances(points, buildBvh(original), (share) =>
    context.progress('Measuring the deviation', 0.7 + 0.3 * share),
  );
  const farther = back.max > there.max ? back : there;
  return {
    mean: Math.max(there.mean, back.mean),
    p95: Math.max(there.p95, back.p95),
    max: farther.max,
    samples: there.samples + back.samples,
    farthestAt: farther.farthestAt,
  };
}

/** Samples of the original that are not buried. */
function samplesOf(original: TriangleMesh, isBuried: BuriedTest): Float64Array {
  const { count, points, triangles } = sampleSurface(original, sampleCount);
  const normal = new Float64Array(3);
  const kept = new Float64Array(points.length);
  let filled = 0;
  for (let i = 0; i < count; i++) {
    unitNormal(original, 3 * triangles[i], normal);
    if (isBuried(points, 3 * i, normal)) continue;
    kept.set(points.subarray(3 * i, 3 * i + 3), filled);
    filled += 3;
  }
  return kept.subarray(0, filled);
}

function distances(
  points: Float64Array,
  to: MeshBVH,
  report: (share: number) => void,
): MeasuredDeviation {
  const count = points.length / 3;
  const found = new Float64Array(count);
  const point = new Vector3();
  const target = { point: new Vector3(), distance: 0, faceIndex: 0 };
  let farthest = 0;
  let sum = 0;
  for (let i = 0; i < count; i++) {
    if ((i & (reportEvery - 1)) === 0) report(i / count);
    point.set(points[3 * i], points[3 * i + 1], points[3 * i + 2]);
    found[i] = to.closestPointToPoint(point, target)?.distance ?? 0;
    sum += found[i];
    if (found[i] > found[farthest]) farthest = i;
  }
  const max = count > 0 ? found[farthest] : 0;
  const at = count > 0 ? points.subarray(3 * farthest, 3 * farthest + 3) : [0, 0, 0];
  found.sort();
  return {
    mean: count > 0 ? sum / count : 0,
    p95: count > 0 ? found[Math.min(count - 1, Math.ceil(0.95 * count) - 1)] : 0,
    max,
    samples: count,
    farthestAt: [at[0], at[1], at[2]],
  };
}

function unitNormal({ positions: p, indices }: TriangleMesh, at: number, target: Float64Array) {
  const [a, b, c] = [3 * indices[at], 3 * indices[at + 1], 3 * indices[at + 2]];
  const [ux, uy, uz] = [p[b] - p[a], p[b + 1] - p[a + 1], p[b + 2] - p[a + 2]];
  const [vx, vy, vz] = [p[c] - p[a], p[c + 1] - p[a + 1], p[c + 2] - p[a + 2]];
  const [x, y, z] = [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
  const length = Math.hypot(x, y, z) || 1;
  target[0] = x / length;
  target[1] = y / length;
  target[2] = z / length;
}
