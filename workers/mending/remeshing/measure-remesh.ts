import { Vector3 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { MeasuredDeviation } from '../../measuring/surface-deviation.js';
import { sampleSurface, type SurfaceSamples } from '../../measuring/surface-samples.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { type JobContext, portionOf } from '../../runtime/job-context.js';
import type { PatchedCells } from './patch-cells.js';

const usualSamples = 20_000;
const reportEvery = 1 << 9;
/** Only samples farther off than this share of a cell are asked whether they are buried. */
const farShare = 0.25;
const stage = 'Measuring the deviation';

export interface RemeshMeasuring {
  readonly isInsideAt: (x: number, y: number, z: number) => boolean;
  /** Side of a cell. */
  readonly spacing: number;
  readonly context: JobContext;
  /** Points each way. */
  readonly samples?: number;
}

/**
 * How far original and rebuilt surface lie apart, both ways: mean, 95th percentile and maximum are the
 * larger of the two. Facets of the original that ended inside the solid are no part of its surface and
 * do not count; nor do patches of the result across holes, which have no original.
 */
export function measureRemesh(
  original: TriangleMesh,
  { mesh, isAcross }: PatchedCells,
  { isInsideAt, spacing, context, samples: wanted = usualSamples }: RemeshMeasuring,
): MeasuredDeviation {
  context.progress(stage, 0);
  const samples = sampleSurface(original, wanted);
  const away = distancesFrom(samples, buildBvh(mesh), portionOf(context, 0.25, 0.5));
  const isBuried = buriedTest(original, samples, isInsideAt, 0.05 * spacing);
  const seen = samplesWhere(samples.count, (i) => {
    if ((i & (reportEvery - 1)) === 0) context.progress(stage, 0.5 + (0.1 * i) / samples.count);
    return away[i] <= farShare * spacing || !isBuried(i);
  });
  const there = summary(samples, away, seen);
  const onFacets = mesh.indices.filter((_, i) => {
    const first = i - (i % 3);
    const [a, b, c] = [mesh.indices[first], mesh.indices[first + 1], mesh.indices[first + 2]];
    return isAcross[a] + isAcross[b] + isAcross[c] === 0;
  });
  const own = sampleSurface({ positions: mesh.positions, indices: onFacets }, wanted);
  context.progress(stage, 0.65);
  const off = distancesFrom(own, buildBvh(original), portionOf(context, 0.7, 1));
  const back = summary(
    own,
    off,
    samplesWhere(own.count, () => true),
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

function samplesWhere(count: number, isKept: (i: number) => boolean): Uint32Array {
  return new Uint32Array(count).map((_, i) => i).filter((i) => isKept(i));
}

/** Whether both sides of the surface at a sample lie inside: the solid has swallowed such facets. */
function buriedTest(
  mesh: TriangleMesh,
  { points, triangles }: SurfaceSamples,
  isInsideAt: RemeshMeasuring['isInsideAt'],
  off: number,
): (i: number) => boolean {
  return (i) => {
    const [nx, ny, nz] = unitNormal(mesh, 3 * triangles[i]);
    const [x, y, z] = [points[3 * i], points[3 * i + 1], points[3 * i + 2]];
    return (
      isInsideAt(x + off * nx, y + off * ny, z + off * nz) &&
      isInsideAt(x - off * nx, y - off * ny, z - off * nz)
    );
  };
}

function distancesFrom(
  { count, points }: SurfaceSamples,
  to: MeshBVH,
  context: JobContext,
): Float64Array {
  const distances = new Float64Array(count);
  const point = new Vector3();
  const target = { point: new Vector3(), distance: 0, faceIndex: 0 };
  for (let i = 0; i < count; i++) {
    if ((i & (reportEvery - 1)) === 0) context.progress(stage, i / count);
    point.set(points[3 * i], points[3 * i + 1], points[3 * i + 2]);
    distances[i] = to.closestPointToPoint(point, target)?.distance ?? 0;
  }
  return distances;
}

/** Of the chosen samples; all zeros when there is none. */
function summary(
  { points }: SurfaceSamples,
  distances: Float64Array,
  chosen: Uint32Array,
): MeasuredDeviation {
  const samples = chosen.length;
  if (samples === 0) return { mean: 0, p95: 0, max: 0, samples, farthestAt: [0, 0, 0] };
  let farthest = chosen[0];
  let sum = 0;
  for (const i of chosen) {
    sum += distances[i];
    if (distances[i] > distances[farthest]) farthest = i;
  }
  const sorted = Float64Array.from(chosen, (i) => distances[i]).sort();
  return {
    mean: sum / samples,
    p95: sorted[Math.min(samples - 1, Math.ceil(0.95 * samples) - 1)],
    max: distances[farthest],
    samples,
    farthestAt: [points[3 * farthest], points[3 * farthest + 1], points[3 * farthest + 2]],
  };
}

/** (0, 0, 0) for a triangle without area. */
function unitNormal({ positions: p, indices }: TriangleMesh, at: number): number[] {
  const [a, b, c] = [3 * indices[at], 3 * indices[at + 1], 3 * indices[at + 2]];
  const [ux, uy, uz] = [p[b] - p[a], p[b + 1] - p[a + 1], p[b + 2] - p[a + 2]];
  const [vx, vy, vz] = [p[c] - p[a], p[c + 1] - p[a + 1], p[c + 2] - p[a + 2]];
  const [x, y, z] = [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
  const length = Math.hypot(x, y, z) || 1;
  return [x / length, y / length, z / length];
}
