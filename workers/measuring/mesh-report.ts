import {
  boundingBox,
  signedVolume,
  surfaceArea,
  type BoundingBox,
} from '../../shared/geometry/mesh/measure.js';
import { connectedShells, type Shells } from '../../shared/geometry/mesh/shells.js';
import { duplicateFacets, edgeReport } from '../../shared/geometry/mesh/topology.js';
import {
  triangleCount,
  vertexCount,
  type TriangleMesh,
} from '../../shared/geometry/mesh/triangle-mesh.js';
import { weldTriangles } from '../../shared/geometry/mesh/weld.js';
import { noChoices } from '../../shared/jobs/mending-choices.js';
import type { MeshReport, SurfaceState } from '../../shared/jobs/model-inspect.js';
import { countOf, refuseFile, spelledCount } from '../intake/refusal-words.js';
import type { StlReading } from '../intake/stl-reader.js';
import { portionOf, silentContext, type JobContext } from '../runtime/job-context.js';
import { orientationOf, turnTriangles, type Orientation } from './orientation.js';
import { flatRefusal, mixedShellsRefusal, openSurfaceRefusal } from './report-sentences.js';

export interface Inspection {
  readonly report: MeshReport;
  /** The closed, outward-oriented solid in file units; null when no plan can be made of it. */
  readonly solid: TriangleMesh | null;
  /** What there is to look at, sound or not; at least one triangle. */
  readonly shown: TriangleMesh;
  readonly timingsMs: { readonly weld: number; readonly inspect: number };
}

/** Shortest longest side accepted, file units: a micrometre if the file is in metres. */
const smallestModel = 1e-6;
/** A float32 coordinate has 24 binary digits. */
const singleStep = 2 ** -23;
/** Coordinates that step by more than this share of the model show as roughness. */
const roughShare = 1 / 20_000;

/**
 * Welds, checks and measures what a file holds. Changes no shape: drops facets whose corners fall
 * together, turns a model that is inside out as a whole, and says both. Lengths in file units.
 * `volume` is 0 while the surface is not closed, for then it has none.
 * Throws a JobRefusal when nothing is left to show.
 */
export function inspectMesh(
  file: { readonly reading: StlReading; readonly fileName: string; readonly fileBytes: number },
  context: JobContext = silentContext,
): Inspection {
  const { reading, fileName, fileBytes } = file;
  const startMs = performance.now();
  const welding = portionOf(context, 0, 0.5);
  const { mesh, degenerateDropped } = weldTriangles(reading.soup, (fraction) =>
    welding.progress('Welding', fraction),
  );
  const weldedMs = performance.now();
  if (mesh.indices.length === 0)
    throw refuseFile(
      fileName,
      `holds ${countOf(reading.facetsRead, 'facet')}, but not one has three different corners.`,
    );
  const box = boundingBox(mesh.positions);
  const longest = Math.max(...box.size);
  if (longest < smallestModel)
    throw refuseFile(
      fileName,
      `holds a model whose longest side is ${shortNumber(longest)}: smaller than dust in any unit. It was scaled wrongly or is damaged.`,
    );

  const checking = portionOf(context, 0.5, 1);
  checking.progress('Checking', 0);
  const edges = edgeReport(mesh);
  checking.progress('Checking', 0.4);
  const duplicates = duplicateFacets(mesh);
  const shells = connectedShells(mesh);
  checking.progress('Measuring', 0.75);
  const area = surfaceArea(mesh);
  const orientation = edges.closed ? orientationOf(mesh, shells, { area, longest }) : null;
  const turnedOutward = orientation?.kind === 'inside-out';
  if (turnedOutward) turnTriangles(mesh.indices);
  checking.progress('Measuring', 1);

  const refusal =
    refusalOf(shells, orientation) ?? (orientation ? null : openSurfaceRefusal(edges, duplicates));
  const state: SurfaceState = {
    triangles: triangleCount(mesh),
    vertices: vertexCount(mesh),
    duplicateFacets: duplicates,
    openEdges: edges.openEdges,
    nonManifoldEdges: edges.nonManifoldEdges,
    misorientedEdges: edges.misorientedEdges,
    shells: shells.count,
    closed: edges.closed,
    volume: orientation ? signedVolume(mesh) : 0,
    area,
    size: [...box.size],
    min: [...box.min],
  };
  const report: MeshReport = {
    ...state,
    format: reading.format,
    fileBytes,
    facetsRead: reading.facetsRead,
    fileUnit: null,
    parts: [],
    asRead: state,
    mending: [],
    holes: [],
    holesFound: 0,
    choices: noChoices,
    remeshDeviation: null,
    degenerateDropped,
    cavities: orientation?.cavities ?? 0,
    turnedOutward,
    measures: null,
    proxy: { triangles: 0, deviation: null },
    places: [],
    asks: [],
    plannable: refusal === null,
    refusal,
    notes: notesOf({ reading, mesh, degenerateDropped, duplicates, shells, orientation, box }),
  };
  return {
    report,
    solid: refusal === null ? mesh : null,
    shown: mesh,
    timingsMs: { weld: weldedMs - startMs, inspect: performance.now() - weldedMs },
  };
}

function refusalOf(shells: Shells, orientation: Orientation | null): string | null {
  if (!orientation) return null;
  if (orientation.flat > 0) return flatRefusal(shells.count, orientation.flat);
  if (orientation.kind === 'mixed') return mixedShellsRefusal(shells.count, orientation);
  return null;
}

function notesOf(found: {
  reading: StlReading;
  mesh: TriangleMesh;
  degenerateDropped: number;
  duplicates: number;
  shells: Shells;
  orientation: Orientation | null;
  box: BoundingBox;
}): string[] {
  const { reading, mesh, degenerateDropped, shells, orientation, box } = found;
  const notes: string[] = [];
  if (orientation?.kind === 'inside-out')
    notes.push('The whole model was inside out. It was turned round; its shape is the same.');
  if (orientation && shells.count > 1) notes.push(shellNote(shells.count, orientation));
  if (orientation && orientation.crossing > 0)
    notes.push(
      `At least ${countOf(orientation.crossing, 'shell')} run${orientation.crossing === 1 ? 's' : ''} into another one. What they share is counted twice and would be printed twice.`,
    );
  if (orientation && !orientation.complete)
    notes.push('There are too many shells to check how all of them lie inside each other.');
  if (degenerateDropped > 0)
    notes.push(
      `${countOf(degenerateDropped, 'facet')} had two corners in one place and ${degenerateDropped === 1 ? 'was' : 'were'} dropped. That changes no shape.`,
    );
  notes.push(...reading.notes);
  const farthest = Math.max(...box.min.map(Math.abs), ...box.max.map(Math.abs));
  const longest = Math.max(...box.size);
  if (farthest * singleStep > longest * roughShare)
    notes.push(
      `The model lies far from the origin (${spelledCount(Math.round(farthest))}). Its coordinates step by ${shortNumber(farthest * singleStep)} there, which may show as roughness.`,
    );
  if (orientation?.kind === 'outward' && notes.length === 0)
    notes.push(
      `A closed surface of ${countOf(triangleCount(mesh), 'triangle')}. Nothing had to be changed.`,
    );
  return notes;
}

function shellNote(shells: number, { cavities }: Orientation): string {
  const solids = shells - cavities;
  if (cavities === 0) return `The model is made of ${countOf(solids, 'solid')}.`;
  return `The model is made of ${countOf(solids, 'solid')} with ${countOf(cavities, 'closed hollow')} inside.`;
}

/** Three figures, without needless zeros or exponents where avoidable. */
function shortNumber(value: number): string {
  return String(Number(value.toPrecision(3)));
}
