import { applyTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { boundingBox, scaleMesh, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Joint, type JointWishes } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type Piece, type PieceOrientation, type PlanOutput } from '../../shared/jobs/plan-make.js';
import { type PlanWishes } from '../../shared/jobs/plan-wishes.js';
import { type CutTree, type OrientationWish } from '../../shared/jobs/recipe.js';
import { fromPlane } from '../../shared/geometry/sections/seam-plane.js';
import { planAssembly } from '../assembling/plan-assembly.js';
import { estimatePart, glueFor } from '../estimating/estimate.js';
import { joinMeshes } from '../mending/uniting/mesh-parts.js';
import { lipInPlace } from '../jointing/backing-lip.js';
import { lipNames, partOf, partsOf } from '../jointing/pin-parts.js';
import { type SeamJoint } from '../jointing/plan-joints.js';
import { type Orientation } from '../orienting/orient-piece.js';
import { cutListCsv } from '../export/cut-list.js';
import { manifestJson } from '../export/manifest.js';
import { writeStl } from '../export/stl-writer.js';
import { choosePlan, remakePlan } from '../planning/choose-plan.js';
import { listCuts } from '../planning/exact-plan.js';
import { measureWrittenPiece, type WrittenPiece } from '../proof/measure-written-piece.js';
import { pieceFits, proofTable } from '../proof/proof-table.js';
import { measureZones } from '../proof/zone-clearance.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import { type Solids } from '../solids/solid-kernel.js';
import { planesOf, withOffsets } from './cut-tree.js';
import { finishBodies, type FinishedPiece } from './finish-bodies.js';
import { outfitPieces, type PlanOutfit } from './outfit-pieces.js';
import { proveJoints } from './prove-joints.js';
import { assemblyStep, totalsOf } from './plan-totals.js';
import { type SeamRegion } from './seam-areas.js';

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
  /** The first is preferred; at least one. */
  spaces: readonly BuildSpace[];
  wishes: PlanWishes;
  joints: JointWishes;
  material: MaterialProfile;
  /** Orientations that a person chose, by the names of the pieces of `tree`. */
  orientations: readonly OrientationWish[];
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
  seams: readonly SeamRegion[];
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
  const { mesh, spaces, wishes, material, seed } = input;
  // Enlarged pieces have to fit: the plan is made for spaces as much smaller.
  const enlargement = enlargementFor(material);
  const innerSpaces = spaces.map((space) => shrunken(space, enlargement));
  const planning = {
    mesh,
    spaces: innerSpaces,
    wishes,
    seed,
    triangulate: solids.triangulate,
    toleranceMm: CUT_TOLERANCE_MM,
    context: portionOf(context, 0, 0.55),
    ...(input.effort !== undefined && { effort: input.effort }),
  };
  const choice = input.tree ? remakePlan(planning, input.tree) : choosePlan(planning);
  const cutting = startWatch();
  const finished = await finishBodies(
    { bodies: choice.bodies, offsets: planesOf(choice.tree).map((plane) => plane.offset) },
    spaces,
    {
      outfit: (bodies, offsets) =>
        outfitPieces(bodies, offsets, {
          spaces: innerSpaces,
          planesAt: (at) => planesOf(withOffsets(choice.tree, at)),
          joints: input.joints,
          material,
          orientations: input.orientations,
          showDirections: wishes.showDirections,
          hints: new Map(choice.bodies.map(({ path }, k) => [path, choice.figures.bodies[k].down])),
          enlargement,
          solids,
          context: portionOf(context, 0.55, 0.75),
        }),
      recut: (offsets) =>
        applyTree(mesh, withOffsets(choice.tree, offsets), {
          triangulate: solids.triangulate,
          toleranceMm: RECUT_TOLERANCE_MM,
        }),
    },
    portionOf(context, 0.75, 0.8),
    lockedCuts(choice.tree),
  );
  const tree = withOffsets(choice.tree, finished.offsets);
  const { seams, joints } = finished.common;
  const bodies = finished.pieces.map(({ name, version }) => ({
    name,
    mesh: enlargement === 1 ? version.mesh : scaleMesh(version.mesh, 1 / enlargement),
  }));
  const moves = planAssembly(
    finished.pieces.map(({ name, body }, k) => ({
      name,
      path: body.path,
      mesh: withLips(bodies[k], seams, joints, solids),
    })),
    seams,
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
  const parts = partsOf(solids, joints);
  const lips = lipNames(joints);
  for (const { part, mesh: partMesh } of parts)
    if (part.file && partMesh)
      await write(
        part.file,
        writeStl(rounded(partMesh), `Seamwright part ${part.name}, millimetres`),
      );
  const pieces = finished.pieces.map((piece, index) =>
    pieceRow(piece, written[index], spaces, finished.common, material),
  );
  const { cuts, objectives } = choice.figures;
  const seamRows = seams.map(({ between, areaMm2, cut }, k) => {
    const { sightMm, bendingKpa, areaMm2: whole } = cuts[cut - 1];
    // Where a cut makes several seams each has its share of what the cut shows.
    const share = whole > 0 ? Math.min(1, areaMm2 / whole) : 0;
    return {
      between,
      areaMm2,
      cut,
      visibleMm: share * sightMm,
      bendingKpa,
      joint: jointRow(joints[k], seams[k], lips[k]),
      glueMl: glueFor(areaMm2, material),
    };
  });
  const assembly = moves.map((move) => assemblyStep(move, seams, pieces, material));
  context.progress('Proving the joints', 0.95);
  const proven = await proveJoints(
    { pieces, seams, joints, moves, material, enlargement },
    files.read,
  );
  const plan: MadePieces['plan'] = {
    recipe: {
      version: 1,
      seed,
      millimetresPerUnit: input.millimetresPerUnit,
      space: spaces[0],
      otherSpaces: spaces.slice(1),
      wishes,
      joints: input.joints,
      material,
      orientations: [...input.orientations],
      tree,
    },
    pieces,
    seams: seamRows,
    bounds: choice.bounds,
    objectives: {
      ...objectives,
      supportMm3: pieces.reduce((sum, piece) => sum + piece.supportMm3, 0),
    },
    offers: choice.offers,
    chosenOffer: choice.chosenOffer,
    parts: parts.map(({ part }) => part),
    assembly,
    totals: totalsOf({ pieces, assembly, parts: parts.map(({ part }) => part) }, material),
    proof: proofTable({
      pieces: written,
      ...proven,
      order: moves,
      spaces: finished.pieces.map((piece) => spaces[piece.space]),
      ...(wishes.keepWhole.length > 0 && {
        keepWhole: measureZones(
          wishes.keepWhole,
          finished.pieces.map(({ body }) => body.mesh),
          mesh,
        ),
      }),
      modelVolumeMm3: enlargement ** 3 * volumeMm3,
      addedMm3: finished.pieces.reduce(
        (sum, { version }) => sum + version.featuresMm3 - version.bevelMm3,
        0,
      ),
      failures: finished.failures,
    }),
  };
  const model = {
    name: input.modelName,
    triangles: mesh.indices.length / 3,
    volumeMm3,
    sizeMm: boundingBox(mesh.positions).size,
    enlargement,
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

/** Numbers, from 0, of the cuts that must stay where they are. */
function lockedCuts(tree: CutTree): Set<number> {
  return new Set(listCuts(tree).flatMap(({ locked }, k) => (locked ? [k] : [])));
}

function pieceRow(
  piece: FinishedPiece,
  written: WrittenPiece,
  spaces: readonly BuildSpace[],
  common: PlanOutfit,
  material: MaterialProfile,
): Piece {
  const { min, max } = written;
  const index = piece.item - 1;
  const orientations = common.orientations[index].map(orientationRow);
  const { supportMm3 } = orientations[0];
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
    orientations,
    estimate: estimatePart(
      { volumeMm3: written.volumeMm3, surfaceMm2: written.surfaceMm2, supportMm3 },
      material,
    ),
    notes: [...common.notes[index], ...piece.version.notes],
    openings: common.openings[index],
  };
}

/** A piece with the lips that are glued into it beforehand: those of seams above it. */
function withLips(
  { name, mesh }: { name: string; mesh: TriangleMesh },
  seams: readonly SeamRegion[],
  joints: readonly SeamJoint[],
  solids: Solids,
): TriangleMesh {
  const lips = seams.flatMap((seam, k) =>
    seam.below === name ? joints[k].lips.map((lip) => lipInPlace(solids, lip, seam)) : [],
  );
  return lips.length > 0 ? joinMeshes([mesh, ...lips]) : mesh;
}

function orientationRow({ tipping, cost: _, ...one }: Orientation): PieceOrientation {
  return { ...one, down: [...one.down], tipping: Number.isFinite(tipping) ? tipping : null };
}

function jointRow(
  joint: SeamJoint,
  { plane, above, between }: SeamRegion,
  lipNames: readonly string[],
): Joint {
  const isAboveFirst = between[0] === above;
  return {
    kind: joint.kind,
    reason: joint.reason,
    notes: [...joint.notes],
    fasteners: [...pinRows(), ...lipRows()],
  };
  function pinRows(): Joint['fasteners'] {
    return joint.pins.map((pin) => {
      const [inAbove, inBelow] = pin.depthsMm;
      return {
        at: [...fromPlane(plane, pin.x, pin.y)],
        fit: pin.fit,
        diameterMm: pin.diameterMm,
        depthsMm: isAboveFirst ? [inAbove, inBelow] : [inBelow, inAbove],
        part: partOf(joint, pin),
      };
    });
  }
  function lipRows(): Joint['fasteners'] {
    return joint.lips.map((lip, k) => ({
      at: [...fromPlane(plane, lip.at.x, lip.at.y)],
      fit: 'loose',
      diameterMm: lip.thicknessMm,
      depthsMm: [lip.heightMm, lip.heightMm],
      part: lipNames[k],
    }));
  }
}

function rounded(mesh: TriangleMesh) {
  return { positions: Float32Array.from(mesh.positions), indices: mesh.indices };
}

/** The middle of a round bed; the middle of a rectangular one has no use but harms nothing. */
function bedMiddle(space: BuildSpace): [number, number] {
  return space.shape === 'round'
    ? [space.diameterMm / 2, space.diameterMm / 2]
    : [space.widthMm / 2, space.depthMm / 2];
}

/** How much larger pieces are written so that they have their size when cold. */
function enlargementFor({ isShrinkageApplied, shrinkagePercent }: MaterialProfile): number {
  return isShrinkageApplied ? 1 / (1 - shrinkagePercent / 100) : 1;
}

function shrunken(space: BuildSpace, factor: number): BuildSpace {
  if (factor === 1) return space;
  return space.shape === 'round'
    ? {
        shape: 'round',
        diameterMm: space.diameterMm / factor,
        heightMm: space.heightMm / factor,
      }
    : {
        shape: 'rectangular',
        widthMm: space.widthMm / factor,
        depthMm: space.depthMm / factor,
        heightMm: space.heightMm / factor,
      };
}

function startWatch(): { elapsedMs: () => number } {
  const start = performance.now();
  return { elapsedMs: () => performance.now() - start };
}
