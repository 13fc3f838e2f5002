import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { Shells } from '../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { ProblemPlace, SolidMeasures } from '../../shared/jobs/model-inspect.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import type { FoundCrossings } from './find-crossings.js';
import { findFlats } from './flat-areas.js';
import { spreadOut } from './spread-out.js';
import { measureWalls, type MeasuredWalls } from './wall-thickness.js';

const mostCrossingPlaces = 20;
const mostThinPlaces = 10;
/** A wall is worth a look when it is thinner than this share of the usual one. Own choice. */
const thinShare = 0.5;
const reachShare = 0.03;

/** Measures a closed solid that faces outward. Lengths in its own unit. */
export function measureSolid(
  mesh: TriangleMesh,
  given: {
    readonly shells: Shells;
    readonly bvh: MeshBVH;
    readonly crossings: FoundCrossings;
    readonly context?: JobContext;
  },
): { measures: SolidMeasures; places: ProblemPlace[] } {
  const { shells, bvh, crossings, context = silentContext } = given;
  const diagonal = Math.hypot(...boundingBox(mesh.positions).size);
  const walls = measureWalls(mesh, bvh, { context });
  context.progress('Measuring', 0.9);
  return {
    measures: {
      genus: genusOf(mesh, shells),
      wall: walls?.report ?? null,
      flats: findFlats(mesh, diagonal),
      shortestEdge: shortestEdge(mesh),
      smallestShell: smallestShell(mesh, shells),
      crossings: { pairs: crossings.pairs, complete: crossings.complete },
    },
    places: [
      ...crossingPlaces(mesh, crossings, diagonal),
      ...(walls ? thinPlaces(walls, diagonal) : []),
    ],
  };
}

/** Handles of all shells together, by Euler's formula V - E + F = 2 shells - 2 handles; E is 3F/2. */
function genusOf({ positions, indices }: TriangleMesh, shells: Shells): number {
  const faces = indices.length / 3;
  const euler = positions.length / 3 - (3 * faces) / 2 + faces;
  return Math.round(shells.count - euler / 2);
}

function shortestEdge({ positions, indices }: TriangleMesh): number {
  let least = Infinity;
  for (let i = 0; i < indices.length; i++) {
    const a = 3 * indices[i];
    const b = 3 * indices[i % 3 === 2 ? i - 2 : i + 1];
    const x = positions[a] - positions[b];
    const y = positions[a + 1] - positions[b + 1];
    const z = positions[a + 2] - positions[b + 2];
    const length2 = x * x + y * y + z * z;
    if (length2 < least) least = length2;
  }
  return Math.sqrt(least);
}

/** Longest side of the box of the smallest shell. */
function smallestShell({ positions, indices }: TriangleMesh, { labels, count }: Shells): number {
  if (count === 1) return Math.max(...boundingBox(positions).size);
  const boxes = new Float64Array(6 * count);
  for (let shell = 0; shell < count; shell++)
    boxes.fill(Infinity, 6 * shell, 6 * shell + 3).fill(-Infinity, 6 * shell + 3, 6 * shell + 6);
  for (let i = 0; i < indices.length; i++) {
    const box = 6 * labels[(i / 3) | 0];
    for (let axis = 0; axis < 3; axis++) {
      const value = positions[3 * indices[i] + axis];
      if (value < boxes[box + axis]) boxes[box + axis] = value;
      if (value > boxes[box + 3 + axis]) boxes[box + 3 + axis] = value;
    }
  }
  let least = Infinity;
  for (let box = 0; box < boxes.length; box += 6)
    least = Math.min(
      least,
      Math.max(
        boxes[box + 3] - boxes[box],
        boxes[box + 4] - boxes[box + 1],
        boxes[box + 5] - boxes[box + 2],
      ),
    );
  return least;
}

function crossingPlaces(
  { positions, indices }: TriangleMesh,
  { triangles }: FoundCrossings,
  diagonal: number,
): ProblemPlace[] {
  const points = new Float64Array((3 * triangles.length) / 2);
  for (let pair = 0; pair < triangles.length / 2; pair++)
    for (let corner = 0; corner < 3; corner++)
      for (let axis = 0; axis < 3; axis++)
        points[3 * pair + axis] +=
          positions[3 * indices[3 * triangles[2 * pair] + corner] + axis] / 3;
  return spreadOut(points, 2 * reachShare * diagonal, mostCrossingPlaces).map((pair) => ({
    kind: 'crossing',
    at: [points[3 * pair], points[3 * pair + 1], points[3 * pair + 2]],
    reach: reachShare * diagonal,
    sentence: 'Surfaces cross each other here.',
  }));
}

function thinPlaces(
  { report, points, thickness }: MeasuredWalls,
  diagonal: number,
): ProblemPlace[] {
  const thin = Array.from(thickness.keys())
    .filter((i) => thickness[i] < thinShare * report.median)
    .sort((a, b) => thickness[a] - thickness[b] || a - b);
  const at = new Float64Array(3 * thin.length);
  thin.forEach((from, to) => at.set(points.subarray(3 * from, 3 * from + 3), 3 * to));
  return spreadOut(at, 2 * reachShare * diagonal, mostThinPlaces).map((i) => ({
    kind: 'thin-wall',
    at: [at[3 * i], at[3 * i + 1], at[3 * i + 2]],
    reach: reachShare * diagonal,
    sentence: 'The wall is thin here, less than half of what is usual in this model.',
  }));
}
