import { applyTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Piece, type PlanOutput } from '../../shared/jobs/plan-make.js';
import { type PlanWishes } from '../../shared/jobs/plan-wishes.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { cutListCsv } from '../export/cut-list.js';
import { manifestJson } from '../export/manifest.js';
import { writeStl } from '../export/stl-writer.js';
import { choosePlan, remakePlan } from '../planning/choose-plan.js';
import { listCuts } from '../planning/exact-plan.js';
import { type BodySupport, supportOn } from '../planning/judging/body-support.js';
import { measureWrittenPiece, type WrittenPiece } from '../proof/measure-written-piece.js';
import { pieceFits, proofTable } from '../proof/proof-table.js';
import { measureZones } from '../proof/zone-clearance.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import { type Solids } from '../solids/solid-kernel.js';
import { planesOf, withOffsets } from './cut-tree.js';
import { finishBodies, type FinishedPiece } from './finish-bodies.js';
import { findSeams, type SeamRegion } from './seam-areas.js';

/**
 * A cut may be placed this far from where the search wanted it, mm: less than any printer's step
 * (DESIGN 4.3).
 */
const CUT_TOLERANCE_MM = 0.02;
/** When a cut is made again at a moved offset, it keeps to that closely, mm. */
const RECUT_TOLERANCE_MM = 0.004;

/** Columns across a piece whose support is measured anew. */
const SUPPORT_COLUMNS = 90;

/** Where the pieces' files go. Names use `/`; `read` gives back what was really stored. */
export interface PieceFiles {
  readonly write: (name: string, bytes: Uint8Array) => Promise<void>;
  readonly read: (name: string) => Promise<Uint8Array>;
}

export interface PiecesInput {
  /** The exact solid, closed and outward, mm. */
  mesh: TriangleMesh;
  modelName: string;
  millimetresPerUnit: number;
  /** The first is preferred; at least one. */
  spaces: readonly BuildSpace[];
  wishes: PlanWishes;
  seed: number;
  /** A tree that was found before: its pieces are made, nothing is searched. */
  tree: CutTree | null;
  /** Share of the usual work of the search. */
  effort?: number;
}

export interface MadePieces {
  plan: Omit<PlanOutput, 'files' | 'timingsMs'>;
  /** Everything that was written, in the order of the ZIP. */
  archive: { name: string; bytes: number }[];
  timingsMs: { plan: number; cut: number; write: number };
  /** The exact bodies in the assembled model, and the seams with their outlines: for pictures. */
  bodies: { name: string; mesh: TriangleMesh }[];
  seams: SeamRegion[];
}

/**
 * Plans, cuts, finishes, writes and proves. Every number about a piece is measured on the bytes that
 * `files` gives back. The same input gives the same files, byte for byte.
 * Throws a JobRefusal when the model needs too many pieces; AbortError when cancelled.
 */
export async function makePieces(
  input: PiecesInput,
  { solids, files, context }: { solids: Solids; files: PieceFiles; context: JobContext },
): Promise<MadePieces> {
  const { mesh, spaces, wishes, seed } = input;
  const planning = {
    mesh,
    spaces,
    wishes,
    seed,
    triangulate: solids.triangulate,
    toleranceMm: CUT_TOLERANCE_MM,
    context: portionOf(context, 0, 0.55),
    ...(input.effort !== undefined && { effort: input.effort }),
  };
  const choice = input.tree ? remakePlan(planning, input.tree) : choosePlan(planning);
  const cutting = startWatch();
  const supportOfPath = new Map(
    choice.bodies.map((body, k) => [body.path, choice.figures.bodies[k]]),
  );
  const finished = finishBodies(
    { bodies: choice.bodies, offsets: planesOf(choice.tree).map((plane) => plane.offset) },
    spaces,
    (offsets) =>
      applyTree(mesh, withOffsets(choice.tree, offsets), {
        triangulate: solids.triangulate,
        toleranceMm: RECUT_TOLERANCE_MM,
      }),
    portionOf(context, 0.55, 0.75),
    { wanted: supportOfPath, locked: lockedCuts(choice.tree) },
  );
  const tree = withOffsets(choice.tree, finished.offsets);
  const bodies = finished.pieces.map(({ name, body }) => ({ name, mesh: body.mesh }));
  const seaming = portionOf(context, 0.75, 0.8);
  const seams = findSeams(bodies, planesOf(tree), solids, (done, total) =>
    seaming.progress('Measuring the seams', done / total),
  );
  const cutMs = choice.cutMs + cutting.elapsedMs();

  const writing = startWatch();
  const volumeMm3 = signedVolume(mesh);
  const archive: MadePieces['archive'] = [];
  const write = async (name: string, bytes: Uint8Array) => {
    await files.write(name, bytes);
    archive.push({ name, bytes: bytes.byteLength });
  };
  const written = await writeAndMeasure(finished.pieces, spaces, { ...files, write }, context);
  const pieces = finished.pieces.map((piece, index) =>
    pieceRow(piece, written[index], spaces, supportOf(piece, supportOfPath, wishes)),
  );
  const { cuts, objectives } = choice.figures;
  const plan: MadePieces['plan'] = {
    recipe: {
      version: 1,
      seed,
      millimetresPerUnit: input.millimetresPerUnit,
      space: spaces[0],
      otherSpaces: spaces.slice(1),
      wishes,
      tree,
    },
    pieces,
    seams: seams.map(({ between, areaMm2, cut }) => {
      const { sightMm, bendingKpa, areaMm2: whole } = cuts[cut - 1];
      // Where a cut makes several seams each has its share of what the cut shows.
      const share = whole > 0 ? Math.min(1, areaMm2 / whole) : 0;
      return { between, areaMm2, cut, visibleMm: share * sightMm, bendingKpa };
    }),
    bounds: choice.bounds,
    objectives,
    offers: choice.offers,
    chosenOffer: choice.chosenOffer,
    proof: proofTable({
      pieces: written,
      spaces: finished.pieces.map((piece) => spaces[piece.space]),
      ...(wishes.keepWhole.length > 0 && {
        keepWhole: measureZones(
          wishes.keepWhole,
          bodies.map((body) => body.mesh),
          mesh,
        ),
      }),
      modelVolumeMm3: volumeMm3,
      failures: finished.failures,
    }),
  };
  const model = {
    name: input.modelName,
    triangles: mesh.indices.length / 3,
    volumeMm3,
    sizeMm: boundingBox(mesh.positions).size,
  };
  const text = new TextEncoder();
  await write('manifest.json', text.encode(manifestJson(model, plan)));
  await write('cut-list.csv', text.encode(cutListCsv(input.modelName, pieces, plan.seams)));
  const timingsMs = { plan: choice.searchMs, cut: cutMs, write: writing.elapsedMs() };
  return { plan, archive, timingsMs, bodies, seams };
}

export function pieceFile(name: string): string {
  return `pieces/${name}.stl`;
}

/** Writes each piece, reads it back and measures what came back; one piece in memory at a time. */
async function writeAndMeasure(
  pieces: readonly FinishedPiece[],
  spaces: readonly BuildSpace[],
  files: PieceFiles,
  context: JobContext,
): Promise<WrittenPiece[]> {
  const steps = portionOf(context, 0.8, 0.95);
  const measured: WrittenPiece[] = [];
  for (const [index, piece] of pieces.entries()) {
    steps.progress('Writing and proving the pieces', index / pieces.length);
    const file = pieceFile(piece.name);
    const axis = bedMiddle(spaces[piece.space]);
    await files.write(file, writeStl(piece.rounded, `Seamwright piece ${piece.name}, millimetres`));
    measured.push(measureWrittenPiece(piece.name, await files.read(file), axis));
  }
  return measured;
}

/** Support of a piece as it lies, mm³: known from planning unless it had to be laid another way. */
function supportOf(
  { body, down }: FinishedPiece,
  planned: ReadonlyMap<string, BodySupport>,
  { overhangDegrees }: PlanWishes,
): number {
  const known = planned.get(body.path);
  if (known && known.down.every((part, axis) => part === down[axis])) return known.supportMm3;
  return supportOn(body.mesh, down, { columns: SUPPORT_COLUMNS, overhangDegrees });
}

/** Numbers, from 0, of the cuts that must stay where they are. */
function lockedCuts(tree: CutTree): Set<number> {
  return new Set(listCuts(tree).flatMap(({ locked }, k) => (locked ? [k] : [])));
}

function pieceRow(
  piece: FinishedPiece,
  written: WrittenPiece,
  spaces: readonly BuildSpace[],
  supportMm3: number,
): Piece {
  const { min, max } = written;
  return {
    item: piece.item,
    name: piece.name,
    triangles: written.facets,
    volumeMm3: written.volumeMm3,
    sizeMm: [max[0] - min[0], max[1] - min[1], max[2] - min[2]],
    fits: pieceFits(written, spaces[piece.space]),
    space: piece.space,
    supportMm3,
    file: pieceFile(piece.name),
    placement: [...piece.motion],
    centreMm: piece.centreMm,
  };
}

/** The middle of a round bed; the middle of a rectangular one has no use but harms nothing. */
function bedMiddle(space: BuildSpace): [number, number] {
  return space.shape === 'round'
    ? [space.diameterMm / 2, space.diameterMm / 2]
    : [space.widthMm / 2, space.depthMm / 2];
}

function startWatch(): { elapsedMs: () => number } {
  const start = performance.now();
  return { elapsedMs: () => performance.now() - start };
}
