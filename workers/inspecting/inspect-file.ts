import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox, signedVolume, surfaceArea } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type MendingChoices, noChoices } from '../../shared/jobs/mending-choices.js';
import type { MeshReport, ProblemPlace, SurfaceState } from '../../shared/jobs/model-inspect.js';
import type { MeshReading } from '../intake/mesh-reading.js';
import { readModel } from '../intake/model-reader.js';
import { countOf, refuseFile } from '../intake/refusal-words.js';
import { measureSolid } from '../measuring/measure-solid.js';
import { surveySurface } from '../measuring/surface-state.js';
import type { Hole } from '../mending/mending.js';
import { beginSimplifying } from '../picturing/simplify-beside.js';
import { type JobContext, portionOf, silentContext } from '../runtime/job-context.js';
import type { Solids } from '../solids/solid-kernel.js';
import { asksOf } from './asks.js';
import { mendToSolid, type MendedModel } from './mend-to-solid.js';
import { allSteps, notesOf } from './notes.js';
import { shortNumber } from './short-number.js';

/** A file with what a person decided about it. */
export interface InspectedFile {
  readonly bytes: Uint8Array;
  readonly fileName: string;
  readonly choices?: MendingChoices;
}

export interface Inspection {
  /** All but `proxy` is final: the picture is made afterwards. */
  readonly report: MeshReport;
  /** The closed, outward-oriented solid in file units; null when no plan can be made of it. */
  readonly solid: TriangleMesh | null;
  /** What there is to look at, sound or not; at least one triangle. */
  readonly shown: TriangleMesh;
  /** Over `shown`, when it is the solid. */
  readonly bvh: MeshBVH | null;
  readonly holes: readonly Hole[];
  readonly timingsMs: { readonly parse: number; readonly weld: number; readonly inspect: number };
}

/** Shortest longest side accepted, file units: a micrometre if the file is in metres. */
const smallestModel = 1e-6;
const mostHolesListed = 500;
const mostPlacesListed = 200;

/**
 * Reads a file, mends it as far as the choices allow, measures what came out, and reports all of it.
 * The same bytes and choices give the same report and the same solid. Does not change `bytes`.
 * Throws a JobRefusal when the file cannot be read or nothing is left to show; a file that can be
 * shown but not planned comes back with `solid: null` and the reason in the report.
 */
export function inspectFile(
  { bytes, fileName, choices = noChoices }: InspectedFile,
  {
    solids,
    context = silentContext,
    willBeDrawn = true,
  }: {
    readonly solids: Solids;
    readonly context?: JobContext;
    /** Whether `pictureInspection` comes after it: then its work is begun beside. */
    readonly willBeDrawn?: boolean;
  },
): Inspection {
  const reading = readModel(bytes, fileName, {
    parts: choices.parts,
    onProgress: portionOf(context, 0, 0.25).progress,
  });
  const startMs = performance.now();
  refuseNothing(reading, fileName);
  context.progress('Checking', 0.25);
  const asRead = surveySurface(reading.mesh);
  // A closed surface mostly stays as it is: what is drawn of it is made beside the rest.
  if (asRead.closed && willBeDrawn) beginSimplifying(reading.mesh);
  const mended = mendToSolid(reading.mesh, asRead.closed, choices, {
    solids,
    context: portionOf(context, 0.3, 0.75),
  });
  const before = asRead.volume > 0 ? asRead : { ...asRead, volume: mended.volumeBefore };
  const report = reportOf({ reading, fileBytes: bytes.length, choices, before, mended, context });
  return {
    report,
    solid:
      report.refusal === null && mended.solid !== null && !isBlocked(report) ? mended.mesh : null,
    shown: mended.mesh,
    bvh: mended.solid?.bvh ?? null,
    holes: mended.holes.slice(0, mostHolesListed),
    timingsMs: { ...reading.timingsMs, inspect: performance.now() - startMs },
  };
}

function refuseNothing({ mesh, facetsRead }: MeshReading, fileName: string): void {
  if (mesh.indices.length === 0)
    throw refuseFile(
      fileName,
      `holds ${countOf(facetsRead, 'facet')}, but not one has three different corners.`,
    );
  const longest = Math.max(...boundingBox(mesh.positions).size);
  if (longest < smallestModel)
    throw refuseFile(
      fileName,
      `holds a model whose longest side is ${shortNumber(longest)}: smaller than dust in any unit. It was scaled wrongly or is damaged.`,
    );
}

/** Whether something has to be decided before there is a solid. */
function isBlocked(report: MeshReport): boolean {
  return report.asks.some((ask) => ask.kind !== 'accept');
}

function reportOf(found: {
  reading: MeshReading;
  fileBytes: number;
  choices: MendingChoices;
  before: SurfaceState;
  mended: MendedModel;
  context: JobContext;
}): MeshReport {
  const { reading, fileBytes, choices, before, mended, context } = found;
  const { solid, mesh } = mended;
  const after = stateAfter(reading, before, mended);
  const measured = solid && measureSolid(mesh, { ...solid, context: portionOf(context, 0.75, 1) });
  const refusal = refusalOf(mended, after);
  const asks = refusal === null ? asksOf(mended, before, after, choices) : [];
  return {
    ...after,
    format: reading.format,
    fileBytes,
    facetsRead: reading.facetsRead,
    fileUnit: reading.fileUnit,
    parts: [...reading.parts],
    asRead: before,
    mending: allSteps(reading, mended),
    holes: mended.holes
      .slice(0, mostHolesListed)
      .map(({ rim: _rim, vertices: _vertices, ...hole }) => hole),
    holesFound: mended.holes.length,
    choices,
    remeshDeviation: mended.remeshDeviation,
    degenerateDropped: reading.degenerateDropped,
    cavities: solid?.cavities ?? 0,
    turnedOutward: solid?.turnedOutward ?? false,
    measures: measured?.measures ?? null,
    proxy: { triangles: 0, deviation: null },
    places: placesOf(mended, measured?.places ?? []),
    asks,
    plannable: solid !== null && refusal === null && asks.length === 0,
    refusal,
    notes: notesOf(reading, before, mended),
  };
}

/** The surface after mending; the survey is not done again when nothing changed. */
function stateAfter(
  reading: MeshReading,
  before: SurfaceState,
  { mesh, solid }: MendedModel,
): SurfaceState {
  if (mesh === reading.mesh) return before;
  if (!solid) return surveySurface(mesh);
  const { size, min } = boundingBox(mesh.positions);
  return {
    triangles: mesh.indices.length / 3,
    vertices: mesh.positions.length / 3,
    openEdges: 0,
    nonManifoldEdges: 0,
    misorientedEdges: 0,
    duplicateFacets: 0,
    shells: solid.shells.count,
    closed: true,
    volume: signedVolume(mesh),
    area: surfaceArea(mesh),
    size: [...size],
    min: [...min],
  };
}

/** What cannot be decided away: a surface that encloses nothing. */
function refusalOf({ mesh, solid }: MendedModel, after: SurfaceState): string | null {
  if (solid === null && after.closed)
    return 'The surface encloses no volume: it is flat, or its two sides lie on each other.';
  if (solid === null && isFlat(mesh))
    return 'The surface is flat and encloses no volume. Give it a thickness where it was made.';
  return null;
}

/** Whether all of it lies in one plane across an axis, which no mending gives a volume. */
function isFlat(mesh: TriangleMesh): boolean {
  const { size } = boundingBox(mesh.positions);
  return Math.min(...size) <= 1e-6 * Math.max(...size);
}

function placesOf(mended: MendedModel, measured: readonly ProblemPlace[]): ProblemPlace[] {
  return [...measured.filter((place) => place.kind === 'crossing'), ...mended.places]
    .concat(measured.filter((place) => place.kind !== 'crossing'))
    .slice(0, mostPlacesListed);
}
