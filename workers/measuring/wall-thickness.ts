import { BackSide, Ray } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { WallReport } from '../../shared/jobs/model-inspect.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { sampleSurface } from './surface-samples.js';

/** The issue asks for 5 000 at least. */
const usualSamples = 8000;
const bins = 24;
/** The histogram ends where this share of the walls does; what is thicker counts in its last bin. */
const shownShare = 0.9;
/** Beyond that, so that walls of one thickness do not all stand at the end of the scale. */
const headroom = 1.25;
const reportEvery = 1024;

/** A wall report with the thickness at every sample. */
export interface MeasuredWalls {
  readonly report: WallReport;
  /** Flat xyz of the samples that met a wall, and the thickness there. */
  readonly points: Float64Array;
  readonly thickness: Float32Array;
}

/**
 * Wall thickness of a closed solid that faces outward: from samples spread evenly over its surface a
 * ray goes straight in, and the wall ends where the ray first leaves the solid. The facet it starts on
 * faces the ray and is no end, so nothing has to be skipped; along the edge of a wedge the true
 * thickness goes to 0, and so does what is measured. Null when no ray met a wall.
 */
export function measureWalls(
  mesh: TriangleMesh,
  bvh: MeshBVH,
  {
    samples = usualSamples,
    context = silentContext,
  }: { samples?: number; context?: JobContext } = {},
): MeasuredWalls | null {
  const { count, points, triangles } = sampleSurface(mesh, samples);
  const normals = new Float64Array(3 * count);
  for (let i = 0; i < count; i++)
    facetNormal(mesh.positions, mesh.indices, 3 * triangles[i], normals, 3 * i);
  const all = wallsAt(points, normals, bvh, context);
  const met: number[] = [];
  for (let i = 0; i < count; i++) if (all[i] > 0) met.push(i);
  if (met.length === 0) return null;
  const thickness = Float32Array.from(met, (i) => all[i]);
  const at = new Float64Array(3 * met.length);
  met.forEach((from, to) => at.set(points.subarray(3 * from, 3 * from + 3), 3 * to));
  return { report: reportOf(at, thickness), points: at, thickness };
}

/**
 * Thickness under points of the surface. @param points flat xyz; @param normals outward unit normals,
 * (0, 0, 0) for none @returns one value a point, 0 where there is no normal or no wall was met
 */
export function wallsAt(
  points: Float64Array,
  normals: Float64Array,
  bvh: MeshBVH,
  context: JobContext = silentContext,
): Float32Array {
  const thickness = new Float32Array(points.length / 3);
  const ray = new Ray();
  for (let i = 0; i < thickness.length; i++) {
    const [x, y, z] = [-normals[3 * i], -normals[3 * i + 1], -normals[3 * i + 2]];
    if (x === 0 && y === 0 && z === 0) continue;
    ray.origin.set(points[3 * i], points[3 * i + 1], points[3 * i + 2]);
    ray.direction.set(x, y, z);
    // The back of a facet is seen where the ray leaves the solid.
    thickness[i] = bvh.raycastFirst(ray, BackSide)?.distance ?? 0;
    if ((i & (reportEvery - 1)) === 0) context.progress('Measuring walls', i / thickness.length);
  }
  return thickness;
}

function reportOf(points: Float64Array, thickness: Float32Array): WallReport {
  const sorted = thickness.slice().sort();
  const at = (share: number) =>
    sorted[Math.min(sorted.length - 1, Math.max(0, Math.ceil(share * sorted.length) - 1))];
  const to = roundUp(headroom * at(shownShare));
  const counts = new Array<number>(bins).fill(0);
  let thinnest = 0;
  thickness.forEach((value, i) => {
    counts[Math.min(bins - 1, Math.floor((value / to) * bins))]++;
    if (value < thickness[thinnest]) thinnest = i;
  });
  return {
    samples: thickness.length,
    min: sorted[0],
    p5: at(0.05),
    median: at(0.5),
    max: sorted[sorted.length - 1],
    histogram: { from: 0, to, counts },
    thinnestAt: [points[3 * thinnest], points[3 * thinnest + 1], points[3 * thinnest + 2]],
  };
}

/** The next of 1, 1.2, 1.5, 2, 2.4, 3, 4, 5, 6, 8 times a power of ten. */
function roundUp(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  const step = [1, 1.2, 1.5, 2, 2.4, 3, 4, 5, 6, 8, 10].find(
    (one) => one * power >= value * 0.9999,
  );
  return (step ?? 10) * power;
}
