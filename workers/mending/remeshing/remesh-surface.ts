import { dropUnusedVertices } from '../../../shared/geometry/mesh/compact.js';
import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox, signedVolume, surfaceArea } from '../../../shared/geometry/mesh/measure.js';
import { shellVolumes } from '../../../shared/geometry/mesh/shells.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingStep, ProblemPlace } from '../../../shared/jobs/model-inspect.js';
import { countOf } from '../../intake/refusal-words.js';
import type { MeasuredDeviation } from '../../measuring/surface-deviation.js';
import { type JobContext, portionOf, silentContext } from '../../runtime/job-context.js';
import type { Solids } from '../../solids/solid-kernel.js';
import { findGridCrossings } from './grid-crossings.js';
import { findSurfaceCells } from './grid-sides.js';
import { patchCells, type PatchedCells } from './patch-cells.js';
import { measureRemesh } from './measure-remesh.js';
import { layGrid } from './sample-grid.js';
import { tellNodeSides } from './node-sides.js';

export type RemeshedSurface =
  | {
      readonly mesh: TriangleMesh;
      readonly deviation: MeasuredDeviation;
      readonly steps: MendingStep[];
      readonly places: ProblemPlace[];
    }
  | { readonly refusal: string };

/** Shells of less than this many cells' volume are strays. Own choice. */
const strayCells = 4;

const nothingInside =
  'The facets enclose no space that a grid of this size could find, so no surface can be rebuilt from them.';

/**
 * Rebuilds a solid from any set of facets: with holes, facets turned round, given twice or running into
 * each other. Inside is where the generalised winding number exceeds one half, sampled on a grid with
 * `cells` cells along the longest side; the vertices of the result lie on the facets where there are any.
 * Edges lose up to half a cell. The result is closed, manifold and faces outward. Facets that face inward
 * as a whole are taken the other way round. The given mesh is not changed.
 * @param tools.samples points each way for the deviation
 */
export function remeshSurface(
  mesh: TriangleMesh,
  cells: number,
  tools: {
    readonly solids?: Solids;
    readonly context?: JobContext;
    readonly samples?: number;
  } = {},
): RemeshedSurface {
  const { context = silentContext } = tools;
  const used = dropUnusedVertices({ positions: mesh.positions, indices: mesh.indices });
  if (used.indices.length === 0 || !(surfaceArea(used) > 0)) return { refusal: nothingInside };
  const grid = layGrid(used.positions, cells);
  const { min, size } = boundingBox(used.positions);
  const middle = min.map((value, axis) => value + size[axis] / 2);
  const facing = signedVolume(about(used, middle)) < 0 ? -1 : 1;
  const crossings = findGridCrossings(used, grid, portionOf(context, 0, 0.1));
  const sides = tellNodeSides(used, grid, crossings, {
    middle,
    facing,
    context: portionOf(context, 0.1, 0.2),
  });
  const surface = findSurfaceCells(grid, crossings, sides.isInside, portionOf(context, 0.2, 0.6));
  const patched = patchCells(grid, surface, crossings, sides, portionOf(context, 0.6, 0.75));
  const { kept, strays } = dropStrays(patched, strayCells * grid.spacing ** 3);
  if (kept.mesh.indices.length === 0 || !edgeReport(kept.mesh).closed)
    return { refusal: nothingInside };
  const deviation = measureRemesh(used, kept, {
    isInsideAt: sides.isInsideAt,
    spacing: grid.spacing,
    samples: tools.samples,
    context: portionOf(context, 0.75, 1),
  });
  return {
    mesh: kept.mesh,
    deviation,
    steps: stepsOf(cells, kept.mesh.indices.length / 3, strays),
    places: [
      {
        kind: 'far-from-original',
        at: [...deviation.farthestAt],
        reach: Math.max(3 * grid.spacing, 1.5 * deviation.max),
        sentence: `The rebuilt surface is farthest from the original here: ${inCells(deviation.max / grid.spacing)}.`,
      },
    ],
  };
}

function stepsOf(cells: number, facets: number, strays: number): MendingStep[] {
  const steps: MendingStep[] = [
    {
      kind: 'remesh',
      count: facets,
      sentence: `The surface was rebuilt on a grid of ${countOf(cells, 'cell')} along the longest side; it has ${countOf(facets, 'facet')} now.`,
    },
  ];
  if (strays > 0)
    steps.push({
      kind: 'drop-shells',
      count: strays,
      sentence: `${countOf(strays, 'stray shell')} smaller than ${strayCells} cells of the grid ${strays === 1 ? 'was' : 'were'} left out.`,
    });
  return steps;
}

function inCells(distance: number): string {
  const rounded = distance < 10 ? distance.toFixed(1) : Math.round(distance).toString();
  return `${rounded} ${rounded === '1.0' ? 'cell' : 'cells'} of the grid`;
}

function about({ positions, indices }: TriangleMesh, middle: readonly number[]): TriangleMesh {
  // signedVolume measures from the first vertex; for an open surface the middle is a fairer place.
  const moved = new Float64Array(positions.length + 3);
  moved.set(middle, 0);
  moved.set(positions, 3);
  return { positions: moved, indices: indices.map((vertex) => vertex + 1) };
}

/** Leaves out shells and hollows that are tiny, but never the largest shell. */
function dropStrays(patched: PatchedCells, least: number): { kept: PatchedCells; strays: number } {
  const { mesh, isAcross } = patched;
  if (mesh.indices.length === 0) return { kept: patched, strays: 0 };
  const shells = surfacesOf(mesh);
  const volumes = shellVolumes(mesh, shells);
  const largest = volumes.indexOf(Math.max(...volumes));
  const isStray = volumes.map((volume, shell) =>
    shell !== largest && Math.abs(volume) < least ? 1 : 0,
  );
  const strays = isStray.reduce((sum, one) => sum + one, 0);
  if (strays === 0) return { kept: patched, strays };
  const indices = mesh.indices.filter((_, i) => isStray[shells.labels[(i / 3) | 0]] === 0);
  const isUsed = new Uint8Array(isAcross.length);
  for (let i = 0; i < indices.length; i++) isUsed[indices[i]] = 1;
  return {
    kept: {
      mesh: dropUnusedVertices({ positions: mesh.positions, indices }),
      isAcross: isAcross.filter((_, vertex) => isUsed[vertex] === 1),
    },
    strays,
  };
}
