import type { PolygonTriangulator } from '../../../shared/geometry/cutting/cut-mesh.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { nextSide } from '../../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingStep, ProblemPlace } from '../../../shared/jobs/model-inspect.js';
import { countOf } from '../../intake/refusal-words.js';
import { type JobContext, silentContext } from '../../runtime/job-context.js';
import type { Hole } from '../mending.js';
import { capFlatRims } from './cap-flat-rims.js';
import { patchLoop } from './patch-loop.js';

const mostPlaces = 50;
/** Distance from a plane up to which rims share it, as a share of the box's diagonal. */
const flatShare = 1e-5;

export interface FilledHoles {
  readonly mesh: TriangleMesh;
  readonly holes: Hole[];
  readonly steps: MendingStep[];
  readonly places: ProblemPlace[];
}

/**
 * Closes holes with a rim of at most `limit`: rims of one plane together by triangulation, so that the
 * cut edge of a thin wall becomes a ring; others by the patch of least folds and area; where a new
 * edge would double an edge of the mesh, by a fan from the rim's middle. New triangles face as their
 * neighbours do. The given mesh is not changed. @param holes as `listHoles` gives them for `mesh`
 */
export function fillHoles(
  mesh: TriangleMesh,
  holes: readonly Hole[],
  limit: number,
  tools: { readonly triangulate: PolygonTriangulator; readonly context?: JobContext },
): FilledHoles {
  const { triangulate, context = silentContext } = tools;
  const chosen = holes.filter((hole) => hole.perimeter <= limit);
  if (chosen.length === 0) return { mesh, holes: [...holes], steps: [], places: [] };
  const edges = edgesAmong(mesh, chosen);
  const tolerance = flatShare * Math.hypot(...boundingBox(mesh.positions).size);
  const added: number[] = [];
  const points: number[] = [];
  const flat = chosen.filter((hole) => hole.isFlat && hole.edges > 3);
  const capped = capFlatRims(flat, tolerance, triangulate, edges.has);
  // One by one: a call takes no list as long as a large cap.
  const add = (triangles: readonly number[]): void => {
    for (const vertex of triangles) added.push(vertex);
    edges.addAll(triangles);
  };
  capped.caps.forEach(add);
  for (const [closed, hole] of chosen.entries()) {
    if (capped.done.has(hole.id)) continue;
    const report = (part: number) =>
      context.progress('Filling holes', (closed + part) / chosen.length);
    add(patchOf(hole, edges.has, report) ?? fanOf(hole, mesh, points));
  }
  const filled = new Set(chosen.map((hole) => hole.id));
  return {
    mesh: append(mesh, points, added),
    holes: holes.map((hole) => (filled.has(hole.id) ? { ...hole, isFilled: true } : hole)),
    steps: [
      {
        kind: 'fill-holes',
        count: chosen.length,
        sentence: `${countOf(chosen.length, 'hole')} ${chosen.length === 1 ? 'was' : 'were'} filled with ${countOf(added.length / 3, 'facet')}.`,
      },
    ],
    places: chosen.slice(0, mostPlaces).map((hole) => ({
      kind: 'hole',
      at: [...hole.centre],
      reach: 2 * hole.reach,
      sentence: `Hole ${hole.id} was filled here.`,
    })),
  };
}

/** Edges between rim vertices, those of the mesh and those added since. */
function edgesAmong(mesh: TriangleMesh, holes: readonly Hole[]) {
  const { indices } = mesh;
  const vertices = mesh.positions.length / 3;
  const isRim = new Uint8Array(vertices);
  for (const hole of holes) for (const vertex of hole.vertices) isRim[vertex] = 1;
  const keys = new Set<number>();
  const keyOf = (a: number, b: number) => (a < b ? a * vertices + b : b * vertices + a);
  for (let side = 0; side < indices.length; side++) {
    const [a, b] = [indices[side], indices[nextSide(side)]];
    if (isRim[a] === 1 && isRim[b] === 1) keys.add(keyOf(a, b));
  }
  return {
    has: (a: number, b: number) => keys.has(keyOf(a, b)),
    addAll: (triangles: readonly number[]) => {
      for (let side = 0; side < triangles.length; side++)
        keys.add(keyOf(triangles[side], triangles[nextSide(side)]));
    },
  };
}

/** The patch runs against the rim. */
function patchOf(
  hole: Hole,
  isEdge: (a: number, b: number) => boolean,
  report: (fraction: number) => void,
): number[] | null {
  const vertices = [...hole.vertices].reverse();
  const loop = new Float64Array(hole.rim.length);
  for (let i = 0; i < vertices.length; i++)
    loop.set(hole.rim.subarray(hole.rim.length - 3 * i - 3, hole.rim.length - 3 * i), 3 * i);
  const triangles = patchLoop(loop, (i, j) => !isEdge(vertices[i], vertices[j]), report);
  return triangles && triangles.map((place) => vertices[place]);
}

/** A fan from a new vertex in the middle of the rim. */
function fanOf(hole: Hole, mesh: TriangleMesh, points: number[]): number[] {
  const middle = (mesh.positions.length + points.length) / 3;
  points.push(...hole.centre);
  const triangles: number[] = [];
  hole.vertices.forEach((vertex, i) => {
    triangles.push(hole.vertices[(i + 1) % hole.vertices.length], vertex, middle);
  });
  return triangles;
}

function append(
  mesh: TriangleMesh,
  points: readonly number[],
  added: readonly number[],
): TriangleMesh {
  const positions = new Float64Array(mesh.positions.length + points.length);
  positions.set(mesh.positions);
  positions.set(points, mesh.positions.length);
  const indices = new Uint32Array(mesh.indices.length + added.length);
  indices.set(mesh.indices);
  indices.set(added, mesh.indices.length);
  return { positions, indices };
}
