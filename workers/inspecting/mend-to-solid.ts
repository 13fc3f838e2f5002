import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { matesOf, OPEN } from '../../shared/geometry/mesh/edge-mates.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingChoices } from '../../shared/jobs/mending-choices.js';
import type { Deviation, MendingStep, ProblemPlace } from '../../shared/jobs/model-inspect.js';
import { fillHoles } from '../mending/holes/fill-holes.js';
import { listHoles } from '../mending/holes/list-holes.js';
import { mendTopology } from '../mending/mend-topology.js';
import type { Hole } from '../mending/mending.js';
import { remeshSurface } from '../mending/remeshing/remesh-surface.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import type { Solids } from '../solids/solid-kernel.js';
import { type MadeSolid, orientAndUnite } from './orient-and-unite.js';
import { volumeWithFlatRims } from './volume-before.js';

export interface MendedModel {
  /** The best surface there is, sound or not. */
  readonly mesh: TriangleMesh;
  /** What is known of the solid; null while the surface is open or contradicts itself. */
  readonly solid: MadeSolid | null;
  readonly steps: readonly MendingStep[];
  readonly places: readonly ProblemPlace[];
  /** All rims found, filled or not, the longest first. */
  readonly holes: readonly Hole[];
  /** What the file's surface encloses once its facets agree and its rims are closed flat. */
  readonly volumeBefore: number;
  readonly remeshDeviation: Deviation | null;
  readonly remeshRefusal: string | null;
}

export interface MendingTools {
  readonly solids: Solids;
  readonly context: JobContext;
}

/** A rim of three edges lacks one facet, and there is one way only to put it back. */
const oneFacet = 3;
/** Rims that are pinholes: up to this share of the box's diagonal. Own choice: 2 mm in 1 m. */
const pinholeShare = 0.002;
/** Distance from a plane up to which a rim is flat, as a share of the diagonal: that of welding. */
const flatShare = 1e-5;

/**
 * Mends a welded mesh step by step into a closed solid that faces outward, as far as the choices
 * allow. Changes no input. `isSound` says that every edge of `welded` is already used once each way.
 * Ends with an AbortError when cancelled.
 */
export function mendToSolid(
  welded: TriangleMesh,
  isSound: boolean,
  choices: MendingChoices,
  { solids, context }: MendingTools,
): MendedModel {
  const topology = mendTopology(welded, portionOf(context, 0, 0.3));
  const diagonal = Math.hypot(...boundingBox(topology.mesh.positions).size);
  const wasClosed = isSound && topology.mesh === welded;
  const holes = wasClosed ? [] : listHoles(topology.mesh, flatShare * diagonal);
  const volumeBefore = volumeWithFlatRims(topology.mesh, holes);
  const filled = fillChosen(topology.mesh, holes, {
    limit: choices.fillHolesUpTo ?? pinholeShare * diagonal,
    tools: { solids, context: portionOf(context, 0.3, 0.5) },
  });
  const steps = [...topology.steps, ...filled.steps];
  const places = [...topology.places, ...filled.places];
  const open: MendedModel = {
    mesh: filled.mesh,
    solid: null,
    steps,
    places,
    holes: filled.holes,
    volumeBefore,
    remeshDeviation: null,
    remeshRefusal: null,
  };
  if (choices.remeshCells !== null)
    return rebuild(open, choices.remeshCells, { solids, context: portionOf(context, 0.5, 1) });
  if (!wasClosed && !edgeReport(filled.mesh).closed) return open;
  const made = orientAndUnite(filled.mesh, { solids, context: portionOf(context, 0.5, 1) });
  return {
    ...open,
    mesh: made.mesh,
    solid: made.solid,
    steps: [...steps, ...made.steps],
    places: [...places, ...made.places],
  };
}

/** Fills one-facet holes and those within the limit; the list keeps its order. */
function fillChosen(
  mesh: TriangleMesh,
  holes: readonly Hole[],
  { limit, tools }: { limit: number; tools: MendingTools },
) {
  const lone = loneFacets(mesh);
  const chosen = holes.filter(
    (hole) =>
      (hole.edges <= oneFacet || hole.perimeter <= limit) && !lone.has(keyOf(hole.vertices)),
  );
  if (chosen.length === 0) return { mesh, holes, steps: [], places: [] };
  const { triangulate } = tools.solids;
  const filled = fillHoles(mesh, chosen, Infinity, { triangulate, context: tools.context });
  const after = new Map(filled.holes.map((hole) => [hole.id, hole]));
  return { ...filled, holes: holes.map((hole) => after.get(hole.id) ?? hole) };
}

/** Facets that hang on no other: their three sides look like the rim of a hole, but are none. */
function loneFacets(mesh: TriangleMesh): Set<string> {
  const { mates } = matesOf(mesh);
  const found = new Set<string>();
  for (let side = 0; side < mates.length; side += 3)
    if (mates[side] === OPEN && mates[side + 1] === OPEN && mates[side + 2] === OPEN)
      found.add(keyOf(mesh.indices.subarray(side, side + 3)));
  return found;
}

function keyOf(vertices: Uint32Array): string {
  return vertices.toSorted().join(' ');
}

/** The surface made anew on a grid; the one before when that is refused. */
function rebuild(before: MendedModel, cells: number, { solids, context }: MendingTools) {
  const rebuilt = remeshSurface(before.mesh, cells, {
    solids,
    context: portionOf(context, 0, 0.9),
  });
  if ('refusal' in rebuilt) return { ...before, remeshRefusal: rebuilt.refusal };
  const made = orientAndUnite(rebuilt.mesh, { solids, context: portionOf(context, 0.9, 1) });
  const { mean, p95, max, samples } = rebuilt.deviation;
  return {
    ...before,
    mesh: made.mesh,
    solid: made.solid,
    steps: [...before.steps, ...rebuilt.steps, ...made.steps],
    places: [...rebuilt.places, ...made.places],
    remeshDeviation: { mean, p95, max, samples },
  };
}
