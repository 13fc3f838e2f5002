import { applyTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Piece, type PlanOutput } from '../../shared/jobs/plan-make.js';
import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { cutListCsv } from '../export/cut-list.js';
import { manifestJson } from '../export/manifest.js';
import { writeStl } from '../export/stl-writer.js';
import { choosePlan } from '../planning/choose-plan.js';
import { measureWrittenPiece, type WrittenPiece } from '../proof/measure-written-piece.js';
import { pieceFits, proofTable } from '../proof/proof-table.js';
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
  space: BuildSpace;
  seed: number;
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
  const { mesh, space, seed } = input;
  const choice = choosePlan({
    mesh,
    space,
    seed,
    triangulate: solids.triangulate,
    toleranceMm: CUT_TOLERANCE_MM,
    context: portionOf(context, 0, 0.55),
  });
  const cutting = startWatch();
  const finished = finishBodies(
    { bodies: choice.bodies, offsets: planesOf(choice.tree).map((plane) => plane.offset) },
    space,
    (offsets) =>
      applyTree(mesh, withOffsets(choice.tree, offsets), {
        triangulate: solids.triangulate,
        toleranceMm: RECUT_TOLERANCE_MM,
      }),
    portionOf(context, 0.55, 0.75),
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
  const written = await writeAndMeasure(finished.pieces, space, { ...files, write }, context);
  const pieces = finished.pieces.map((piece, index) => pieceRow(piece, written[index], space));
  const plan: MadePieces['plan'] = {
    recipe: {
      version: 1,
      seed,
      millimetresPerUnit: input.millimetresPerUnit,
      space,
      otherSpaces: [],
      wishes: usualWishes,
      tree,
    },
    pieces,
    seams: seams.map(({ between, areaMm2, cut }) => ({
      between,
      areaMm2,
      cut,
      visibleMm: 0,
      bendingKpa: 0,
    })),
    bounds: { ...choice.bounds, gap: '' },
    objectives: null,
    offers: [],
    chosenOffer: null,
    proof: proofTable({
      pieces: written,
      space,
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
  space: BuildSpace,
  files: PieceFiles,
  context: JobContext,
): Promise<WrittenPiece[]> {
  const steps = portionOf(context, 0.8, 0.95);
  const axis = bedMiddle(space);
  const measured: WrittenPiece[] = [];
  for (const [index, piece] of pieces.entries()) {
    steps.progress('Writing and proving the pieces', index / pieces.length);
    const file = pieceFile(piece.name);
    await files.write(file, writeStl(piece.rounded, `Seamwright piece ${piece.name}, millimetres`));
    measured.push(measureWrittenPiece(piece.name, await files.read(file), axis));
  }
  return measured;
}

function pieceRow(piece: FinishedPiece, written: WrittenPiece, space: BuildSpace): Piece {
  const { min, max } = written;
  return {
    item: piece.item,
    name: piece.name,
    triangles: written.facets,
    volumeMm3: written.volumeMm3,
    sizeMm: [max[0] - min[0], max[1] - min[1], max[2] - min[2]],
    fits: pieceFits(written, space),
    space: 0,
    supportMm3: 0,
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
