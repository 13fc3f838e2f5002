import { MeshoptSimplifier } from 'meshoptimizer';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { restingDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { convexHull3d, cornerPoints } from '../../shared/geometry/fitting/convex-hull-3d.js';
import { diagonalDowns, poseOn } from '../../shared/geometry/fitting/lay-on-bed.js';
import { outerVertices } from '../../shared/geometry/fitting/outer-vertices.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { planeFrame } from '../../shared/geometry/vectors/plane-frame.js';
import { RatedPiece, type Rating, type RatingTask } from './rate-orientation.js';

export interface OrientTask extends RatingTask {
  /** A piece goes to the first that holds it. */
  readonly spaces: readonly BuildSpace[];
  /** Points beyond the mesh that must fit as well (ends of fixed pins): flat xyz, mm. */
  readonly alsoInside?: Float64Array;
  /** Directions worth trying beside the usual ones, such as the planner's. */
  readonly hints?: readonly Vector3[];
}

export interface Orientation extends Rating {
  /** Number of the space that holds the piece so. */
  readonly space: number;
}

/** A lighter mesh stands for the piece while directions are compared. */
const LIGHT_TRIANGLES = 8000;
/** Directions spread over the sphere beside faces and axes. */
const SPREAD = 300;
/** Directions measured by columns, and of these the ones that are tilted on. */
const MEASURED = 48;
const TILTED = 4;
const TILTS_DEGREES = [8, 4, 2, 1];
/** Columns across a piece while comparing, and for its final figures. */
const ROUGH_COLUMNS = 72;
const FINE_COLUMNS = 110;
const FINEST_MM = 0.8;
/** Measured on the exact piece. */
const FINALISTS = 5;
/** Orientations that are offered. */
const OFFERED = 4;
/** Orientations nearer than this are one (cosine of 6°), and start tilting alike (of 16°). */
const ALIKE_COS = 0.9945;
const SAME_VALLEY_COS = 0.961;
/** Support below that, mm³ or share of the piece, is none worth tilting a piece for. */
const NEXT_TO_NOTHING_MM3 = 60;
const NEXT_TO_NOTHING_SHARE = 0.004;

/**
 * The best orientations of a piece, the best first, at most four, each in a space that holds it.
 * Compared are its seam faces, its hull's faces, axes, and directions spread over the sphere, by
 * support, scars, height, foot, tipping, sockets and pins (see Rating); the most promising are
 * measured on a lighter mesh and tilted step by step, the last few and upright on the piece itself.
 * Empty when it fits in none of the directions.
 */
export async function orientPiece(mesh: TriangleMesh, task: OrientTask): Promise<Orientation[]> {
  await MeshoptSimplifier.ready;
  const outer = outerVertices(mesh.positions);
  const hull = convexHull3d(outer);
  const corners = withMore(cornerPoints(outer, hull), task.alsoInside);
  const fits = (down: Vector3) =>
    task.spaces.findIndex((space) => poseOn(corners, space, down)?.fits ?? false);
  const { standing, others } = restingDirections(mesh, outer, hull);
  const downs = [...(task.hints ?? []), ...standing, ...others, ...spreadDirections(SPREAD)];
  const light = lighter(mesh);
  const rough = new RatedPiece(light, task);
  // The promising first: whether a direction fits costs more than its bound.
  const promising = (all: readonly Vector3[]) =>
    firstOf(
      distinct(sorted(all.map((down) => rough.bound(down)))),
      ({ down }) => fits(down) >= 0,
      MEASURED,
    );
  let bounded = promising(downs);
  if (bounded.length === 0)
    bounded = promising(task.spaces.flatMap((space) => diagonalDowns(corners, space)));
  if (bounded.length === 0) return [];

  const longest = Math.max(...boundingBox(mesh.positions).size);
  const roughMm = Math.max(FINEST_MM, longest / ROUGH_COLUMNS);
  const measured = bounded.map(({ down }) => rough.rate(down, roughMm));
  const best = sorted(measured);
  const worthTilting = Math.max(NEXT_TO_NOTHING_MM3, NEXT_TO_NOTHING_SHARE * signedVolume(mesh));
  const tilted = distinct(best, SAME_VALLEY_COS)
    .slice(0, TILTED)
    .filter((rating) => rating.supportMm3 > worthTilting)
    .map((rating) => tilt(rating, rough, roughMm, (down) => fits(down) >= 0));
  const finalists = distinct(sorted([...best, ...tilted])).slice(0, FINALISTS);
  const upright: Vector3 = [0, 0, -1];
  const downsLeft = finalists.map(({ down }) => down);
  if (fits(upright) >= 0 && !downsLeft.some((down) => down[2] < -1 + 1e-9)) downsLeft.push(upright);

  const exact = light === mesh ? rough : new RatedPiece(mesh, task);
  const fineMm = Math.max(FINEST_MM, longest / FINE_COLUMNS);
  const rated = sorted(downsLeft.map((down) => exact.rate(down, fineMm)));
  return rated.slice(0, OFFERED).map((rating) => ({ ...rating, space: fits(rating.down) }));
}

/** The figures of one given orientation, measured as finely as those of `orientPiece`. */
export function rateAs(mesh: TriangleMesh, task: RatingTask, down: Vector3): Rating {
  const longest = Math.max(...boundingBox(mesh.positions).size);
  return new RatedPiece(mesh, task).rate(down, Math.max(FINEST_MM, longest / FINE_COLUMNS));
}

/** Steps of falling size in six directions around, as long as one of them is better. */
function tilt(
  start: Rating,
  piece: RatedPiece,
  pitchMm: number,
  fits: (down: Vector3) => boolean,
): Rating {
  let best = start;
  for (const degrees of TILTS_DEGREES)
    for (let moves = 0; moves < 4; moves++) {
      const around = neighbours(best.down, degrees).map((down) => piece.rate(down, pitchMm));
      const next = sorted(around).find(({ cost, down }) => cost < best.cost && fits(down));
      if (!next) break;
      best = next;
    }
  return best;
}

function neighbours(down: Vector3, degrees: number): Vector3[] {
  const { u, v } = planeFrame(down);
  const [c, s] = [Math.cos((degrees * Math.PI) / 180), Math.sin((degrees * Math.PI) / 180)];
  return Array.from({ length: 6 }, (_, k) => {
    const angle = (k * Math.PI) / 3;
    const [a, b] = [s * Math.cos(angle), s * Math.sin(angle)];
    return [0, 1, 2].map(
      (axis) => c * down[axis] + a * u[axis] + b * v[axis],
    ) as unknown as Vector3;
  });
}

/** Evenly spread directions on a spiral of golden angles. */
export function spreadDirections(count: number): Vector3[] {
  const golden = Math.PI * (3 - Math.sqrt(5));
  return Array.from({ length: count }, (_, k) => {
    const z = 1 - (2 * k + 1) / count;
    const r = Math.sqrt(1 - z * z);
    return [r * Math.cos(k * golden), r * Math.sin(k * golden), z];
  });
}

function lighter(mesh: TriangleMesh): TriangleMesh {
  if (mesh.indices.length / 3 <= 1.5 * LIGHT_TRIANGLES) return mesh;
  const positions = Float32Array.from(mesh.positions);
  const [indices] = MeshoptSimplifier.simplify(
    mesh.indices,
    positions,
    3,
    3 * LIGHT_TRIANGLES,
    0.01,
  );
  return { positions: mesh.positions, indices };
}

/** The first of a list that pass, at most so many. */
function firstOf<T>(list: readonly T[], passes: (one: T) => boolean, most: number): T[] {
  const found: T[] = [];
  for (const one of list) {
    if (found.length === most) break;
    if (passes(one)) found.push(one);
  }
  return found;
}

function sorted<R extends Rating>(ratings: readonly R[]): R[] {
  return [...ratings].sort((a, b) => a.cost - b.cost);
}

/** Without those that are nearly the same as a better one. */
function distinct<R extends Rating>(ratings: readonly R[], alikeCos = ALIKE_COS): R[] {
  const kept: R[] = [];
  for (const rating of ratings)
    if (
      !kept.some(
        ({ down: [x, y, z] }) =>
          x * rating.down[0] + y * rating.down[1] + z * rating.down[2] > alikeCos,
      )
    )
      kept.push(rating);
  return kept;
}

function withMore(points: Float64Array, more: Float64Array | undefined): Float64Array {
  if (!more || more.length === 0) return points;
  const all = new Float64Array(points.length + more.length);
  all.set(points);
  all.set(more, points.length);
  return all;
}
