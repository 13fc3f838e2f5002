import { readFile, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { scaleMesh, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type Offer } from '../../shared/jobs/plan-make.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { type MadePieces, makePieces } from '../building/make-pieces.js';
import { gapInWords } from '../planning/lower-bound.js';
import { type MendingChoices } from '../../shared/jobs/mending-choices.js';
import { mayBePlanned, type MeshReport } from '../../shared/jobs/model-inspect.js';
import { inspectFile } from '../inspecting/inspect-file.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { loadSolids } from '../solids/solid-kernel.js';
import { type Interruption, listenForInterruption } from './interruption.js';
import {
  checkOutputFolder,
  openOutputFolder,
  openTemporaryFolder,
  type PieceFolder,
} from './output-folder.js';
import { nameFile, type PlanCommand } from './parse-arguments.js';
import { type PlanReport } from './plan-report.js';
import { readJoints, readMaterial, readWishes } from './read-wishes.js';
import { UsageError } from './usage-error.js';

/** The same limit as for uploads. */
const LARGEST_FILE_BYTES = 512 * 1024 * 1024;

/**
 * Inspects, plans, cuts, writes and proves one file: what the server's jobs do, from a shell. Nothing
 * is written before the pieces exist, and nothing is left when anything fails.
 * Throws a UsageError or a JobRefusal with sentences that name the file.
 */
export async function planModel(
  command: Omit<PlanCommand, 'kind' | 'json'>,
  context: JobContext,
): Promise<PlanReport> {
  const { modelPath, outFolder } = command;
  const wishes = await readWishes(command.wishesPath);
  const joints = await readJoints(command.jointsPath);
  const material = await readMaterial(command.material);
  const bytes = await readModel(modelPath);
  if (outFolder !== null)
    await checkOutputFolder(outFolder).catch((error) => {
      throw nameFile(modelPath, error);
    });
  const fileName = basename(modelPath);
  // WebAssembly compiles beside the reading.
  const loading = loadSolids();
  const { report, solid, timingsMs } = inspectFile(
    { bytes, fileName, choices: choicesOf(command) },
    { solids: await loading, context: portionOf(context, 0, 0.15), willBeDrawn: false },
  );
  if (!solid || !mayBePlanned(report, command.accept))
    throw new JobRefusal(namedRefusal(fileName, whyNot(report, command.millimetresPerUnit ?? 1)));
  const { spaces, seed } = command;
  const millimetresPerUnit = command.millimetresPerUnit ?? report.fileUnit?.millimetres ?? 1;
  const mesh = millimetresPerUnit === 1 ? solid : scaleMesh(solid, millimetresPerUnit);

  const folder = createLazyFolder(() =>
    outFolder === null ? openTemporaryFolder() : openOutputFolder(outFolder),
  );
  try {
    const made = await makePieces(
      {
        mesh,
        modelName: fileName,
        millimetresPerUnit,
        spaces,
        wishes,
        joints,
        material,
        orientations: [],
        seed,
        tree: null,
      },
      { solids: await loading, files: folder.files, context: portionOf(context, 0.15, 1) },
    );
    await folder.keep();
    return {
      model: {
        triangles: report.triangles,
        volumeMm3: signedVolume(mesh),
        sizeMm: scaled(report.size, millimetresPerUnit),
        closed: report.closed,
      },
      pieces: made.plan.pieces.map(({ name, triangles, volumeMm3, sizeMm, fits, file }) => ({
        name,
        triangles,
        volumeMm3,
        sizeMm,
        fits,
        file: outFolder === null ? basename(file) : join(outFolder, file),
      })),
      seams: made.plan.seams.map(({ between, areaMm2 }) => ({ between, areaMm2 })),
      bounds: { pieces: made.plan.bounds.pieces },
      proof: made.plan.proof,
      timingsMs: { ...timingsMs, ...made.timingsMs },
      // Linux counts the peak in kilobytes; Node passes it on as it is.
      peakMemoryMb: process.resourceUsage().maxRSS / 1024,
      plans: made.plan.offers.map((offer, k) => offerReport(offer, k, made.plan)),
      mending: report.mending,
    };
  } catch (error) {
    if (isFileSystemError(error))
      throw new UsageError(
        `The pieces of “${modelPath}” could not be written to “${outFolder ?? tmpdir()}” (${error.code}).`,
      );
    // A refusal of the search knows the shape, not the file.
    if (error instanceof JobRefusal) throw new JobRefusal(namedRefusal(fileName, error.message));
    throw nameFile(modelPath, error);
  } finally {
    await folder.discard();
  }
}

async function readModel(modelPath: string): Promise<Uint8Array> {
  const refuse = (what: string) => new UsageError(`“${modelPath}” ${what}.`);
  try {
    const found = await stat(modelPath);
    if (found.isDirectory()) throw refuse('is a folder, not an STL file');
    if (!found.isFile()) throw refuse('is not a regular file');
    if (found.size > LARGEST_FILE_BYTES)
      throw refuse(
        `has ${Math.round(found.size / 1024 / 1024)} MB, and the largest that is read is ${LARGEST_FILE_BYTES / 1024 / 1024} MB`,
      );
    return await readFile(modelPath);
  } catch (error) {
    if (error instanceof UsageError) throw error;
    // What the file system says, in words.
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT' || code === 'ENOTDIR') throw refuse('does not exist');
    if (code === 'EACCES' || code === 'EPERM') throw refuse('may not be read by this user');
    if (code === 'ENAMETOOLONG') throw refuse('is too long a name for a file');
    throw refuse(`cannot be read (${code ?? String(error)})`);
  }
}

function offerReport(
  { bestAt, objectives, tree }: Offer,
  place: number,
  { chosenOffer, bounds, recipe, pieces, seams }: MadePieces['plan'],
): PlanReport['plans'][number] {
  const isMade = place === chosenOffer;
  return {
    bestAt,
    isMade,
    objectives,
    bounds: { ...bounds, gap: gapInWords(objectives.pieces, bounds.pieces) },
    // Finishing may have moved the cuts of the plan that was made by a hair.
    cuts: listOf(isMade ? recipe.tree : tree),
    ...(isMade && {
      pieces: pieces.map(({ name, supportMm3, space }) => ({ name, supportMm3, envelope: space })),
      seams: seams.map(({ between, visibleMm, bendingKpa }) => ({
        between,
        visibleMm,
        bendingKpa,
      })),
    }),
  };
}

function listOf(tree: CutTree): PlanReport['plans'][number]['cuts'] {
  if (tree.kind === 'leaf') return [];
  const { plane, locked = false, reason } = tree;
  return [{ ...plane, locked, reason }, ...listOf(tree.above), ...listOf(tree.below)];
}

/** Rims are measured in the file's unit; a unit that only the file knows is taken as mm. */
function choicesOf(command: Omit<PlanCommand, 'kind' | 'json'>): MendingChoices {
  const { parts, remeshCells, fillHolesUpToMm } = command;
  const fillHolesUpTo = fillHolesUpToMm && fillHolesUpToMm / (command.millimetresPerUnit ?? 1);
  return { parts, remeshCells, fillHolesUpTo };
}

/** Why there is no plan, and which option would answer the question, in one sentence. */
function whyNot({ refusal, asks, asRead, volume }: MeshReport, millimetresPerUnit: number): string {
  if (refusal !== null) return refusal;
  const [ask] = asks;
  if (!ask) return 'It cannot be planned.';
  if (ask.kind === 'fill-holes') {
    const longestMm = (ask.longest * millimetresPerUnit).toFixed(1);
    return `Its surface has ${ask.count === 1 ? 'a hole' : `${ask.count} holes`} with a rim of up to ${longestMm} mm: give --fill-holes MM or --remesh CELLS.`;
  }
  if (ask.kind === 'remesh')
    return 'Its surface cannot be mended without changing its shape: give --remesh CELLS to rebuild it.';
  const percent = asRead.volume > 0 ? (100 * (volume / asRead.volume - 1)).toFixed(2) : '100';
  return `Mending changes its volume by ${percent} % or its outer size: give --accept to take that.`;
}

/** A refusal that begins with the file's name. */
function namedRefusal(fileName: string, message: string): string {
  if (message.includes(fileName)) return message;
  return `“${fileName}” cannot be planned: ${message[0].toLowerCase()}${message.slice(1)}`;
}

function scaled(size: readonly [number, number, number], factor: number): [number, number, number] {
  return [size[0] * factor, size[1] * factor, size[2] * factor];
}

/** A full disk, missing rights and the like while writing; everything is read before. */
function isFileSystemError(error: unknown): error is NodeJS.ErrnoException {
  return error instanceof Error && 'syscall' in error && 'code' in error;
}

/**
 * A folder that is opened when the first file is written: a refusal then leaves the disk alone. From
 * then on an interruption ends the writing in an error instead of the process.
 */
function createLazyFolder(open: () => Promise<PieceFolder>): PieceFolder {
  let opening: Promise<PieceFolder> | undefined;
  let interruption: Interruption | undefined;
  const opened = () => {
    interruption ??= listenForInterruption();
    interruption.throwIfAsked();
    return (opening ??= open());
  };
  return {
    files: {
      write: async (name, bytes) => (await opened()).files.write(name, bytes),
      read: async (name) => (await opened()).files.read(name),
    },
    keep: async () => (await opened()).keep(),
    discard: async () => {
      // A folder that could not be opened has said so already, and has left nothing.
      await (await opening?.catch(() => undefined))?.discard();
      interruption?.stopListening();
    },
  };
}
