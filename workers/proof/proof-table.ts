import { type ProofRow } from '../../shared/jobs/plan-make.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { counted, length, listed, shown, spaceInWords, sum } from './measured-words.js';
import { type JointFindings, type MoveFindings } from './joint-proof.js';
import { type ZoneClearance } from './zone-clearance.js';
import { type WrittenPiece } from './measure-written-piece.js';

/**
 * Room a box may be over its limit, mm: coordinates are stored as float32, whose step is 6.1e-5 mm
 * near 1000 mm (computed, FACTS). No printer's axis knows a tenth of a micrometre.
 */
export const FIT_TOLERANCE_MM = 1e-4;

/** Relative difference allowed between the model's volume and the sum of its pieces'. */
export const VOLUME_TOLERANCE = 1e-6;

export interface ProofInput {
  pieces: readonly WrittenPiece[];
  /** For each piece the space it goes to. */
  spaces: readonly BuildSpace[];
  /** Volume of the solid that was cut, mm³. */
  modelVolumeMm3: number;
  /** What sockets, pins, marks and bevels add to all pieces together (mostly negative), mm³. */
  addedMm3: number;
  /** Seams measured against the keep-whole zones; absent when there are none. */
  keepWhole?: ZoneClearance;
  /** Sockets measured by rays; absent when there are none. */
  joints?: JointFindings;
  /** Least material round a socket, mm. */
  leastSocketWallMm?: number;
  /** The moves of the glue-up drawn backwards; absent when there are none. */
  moves?: MoveFindings;
  /** What the planner itself found about each move. */
  order?: readonly { readonly isFree: boolean }[];
  /** Sentences about pieces that could not be finished; each fails a row of its own. */
  failures: readonly string[];
}

/** The measured checks of a plan, one row a check over all pieces, in the order a maker reads them. */
export function proofTable(input: ProofInput): ProofRow[] {
  const { pieces } = input;
  return [
    wholeFiles(pieces),
    closedSurfaces(pieces),
    turnedOutward(pieces),
    oneBodyEach(pieces),
    restsOnBed(pieces),
    fitsTheSpaces(pieces, input.spaces),
    volumesAddUp(pieces, input),
    ...(input.joints && input.joints.sockets > 0 ? jointRows(input.joints, input) : []),
    ...(input.moves && input.moves.moves > 0 ? [waysAreFree(input.moves, input.order ?? [])] : []),
    ...(input.keepWhole ? [zonesStayWhole(input.keepWhole)] : []),
    ...input.failures.map((sentence) => ({
      check: 'Finishing of every piece',
      measured: sentence,
      limit: 'no failure',
      passed: false,
    })),
  ];
}

/** Whether a written piece lies inside the build volume by its own coordinates. */
export function pieceFits(piece: WrittenPiece, space: BuildSpace): boolean {
  return overhangMm(piece, space) <= FIT_TOLERANCE_MM;
}

function wholeFiles(pieces: readonly WrittenPiece[]): ProofRow {
  const bad = pieces.filter((piece) => !piece.sizeMatches || !piece.finite || piece.facets === 0);
  return {
    check: 'Files are whole',
    measured: bad.length > 0 ? `${listed(bad)} damaged` : `${counted(pieces.length, 'file')} whole`,
    limit: 'size 84 + 50 bytes a triangle, all coordinates numbers',
    passed: pieces.length > 0 && bad.length === 0,
  };
}

function closedSurfaces(pieces: readonly WrittenPiece[]): ProofRow {
  const faults = (piece: WrittenPiece) =>
    piece.openEdges + piece.repeatedEdges + piece.collapsedFacets;
  const bad = pieces.filter((piece) => faults(piece) > 0);
  const total = bad.reduce((sum, piece) => sum + faults(piece), 0);
  return {
    check: 'Surfaces are closed',
    measured:
      bad.length > 0 ? `${total} in ${listed(bad)}` : `0 in ${counted(pieces.length, 'piece')}`,
    limit: '0 open or doubled edges',
    passed: bad.length === 0,
  };
}

function turnedOutward(pieces: readonly WrittenPiece[]): ProofRow {
  const bad = pieces.filter((piece) => !(piece.volumeMm3 > 0) || piece.strayHollows > 0);
  const smallest = pieces.reduce<WrittenPiece | null>(
    (least, piece) => (least === null || piece.volumeMm3 < least.volumeMm3 ? piece : least),
    null,
  );
  return {
    check: 'Surfaces face outward',
    measured:
      bad.length > 0
        ? `${listed(bad)} inside out`
        : `smallest ${shown(smallest?.volumeMm3 ?? 0)} mm³ (${smallest?.name ?? 'none'})`,
    limit: 'volume above 0 mm³',
    passed: bad.length === 0,
  };
}

function oneBodyEach(pieces: readonly WrittenPiece[]): ProofRow {
  const bad = pieces.filter((piece) => piece.bodies !== 1);
  const hollow = pieces.filter((piece) => piece.hollows > 0);
  const hollows =
    hollow.length > 0
      ? `, with ${counted(sum(hollow.map((piece) => piece.hollows)), 'closed hollow')} in ${listed(hollow)}`
      : '';
  const bodies = sum(pieces.map((piece) => piece.bodies));
  return {
    check: 'One body a piece',
    measured:
      bad.length > 0
        ? bad
            .slice(0, 5)
            .map((piece) => `${piece.name} has ${piece.bodies}`)
            .join(', ')
        : `${bodies} in ${counted(pieces.length, 'piece')}${hollows}`,
    limit: '1 body in each',
    passed: bad.length === 0,
  };
}

function restsOnBed(pieces: readonly WrittenPiece[]): ProofRow {
  const worst = worstOf(pieces, (piece) => Math.abs(piece.min[2]));
  const passed = worst.value <= FIT_TOLERANCE_MM;
  return {
    check: 'Pieces rest on the bed',
    measured: passed
      ? `lowest points at ${length(worst.value)} mm`
      : `${worst.name} is ${length(worst.value)} mm off`,
    limit: `0 mm ± ${FIT_TOLERANCE_MM} mm`,
    passed,
  };
}

function fitsTheSpaces(pieces: readonly WrittenPiece[], spaces: readonly BuildSpace[]): ProofRow {
  const spaceOf = new Map(pieces.map((piece, k) => [piece, spaces[k]]));
  const bad = pieces.filter((piece) => !pieceFits(piece, spaceOf.get(piece)!));
  const tightest = worstOf(pieces, (piece) => overhangMm(piece, spaceOf.get(piece)!));
  const room = Math.max(0, -tightest.value);
  return {
    check: 'Pieces fit the build volume',
    measured:
      bad.length > 0
        ? `${listed(bad)} over, ${tightest.name} by ${length(tightest.value)} mm`
        : `least room ${length(room)} mm (${tightest.name})`,
    limit: `${[...new Set(spaces.map(spaceInWords))].join(' or ')}, ± ${FIT_TOLERANCE_MM} mm`,
    passed: bad.length === 0,
  };
}

/** Files hold float32 and sockets are polygons: gaps may be less by this, mm. */
const GAP_TOLERANCE_MM = 0.02;
/** Corners of a polygon come nearer to what is behind than its circle, mm. */
const WALL_TOLERANCE_MM = 0.06;

function jointRows(joints: JointFindings, { leastSocketWallMm = 0 }: ProofInput): ProofRow[] {
  const { sockets, leastSpareMm, tightest, leastWallMm, thinnest, blocked } = joints;
  const limit = leastSocketWallMm - WALL_TOLERANCE_MM;
  return [
    {
      check: 'Pins have room in their sockets',
      measured:
        blocked.length > 0
          ? `no socket in ${blocked.slice(0, 5).join(', ')} where a pin should go`
          : `${counted(sockets, 'socket')}, tightest ${length(leastSpareMm)} mm beyond its clearance (${tightest})`,
      limit: `clearance all round, ± ${GAP_TOLERANCE_MM} mm`,
      passed: blocked.length === 0 && leastSpareMm >= -GAP_TOLERANCE_MM,
    },
    {
      check: 'Sockets have material round them',
      measured: `thinnest ${length(leastWallMm)} mm (${thinnest})`,
      limit: `at least ${length(limit)} mm`,
      passed: leastWallMm >= limit,
    },
  ];
}

function waysAreFree(
  { moves, rays, blocked }: MoveFindings,
  order: readonly { readonly isFree: boolean }[],
): ProofRow {
  const planned = order.flatMap(({ isFree }, k) => (isFree ? [] : [k + 1]));
  const [first] = blocked;
  const measured = first
    ? `step ${first.step}: ${first.by} is in the way of ${first.of}`
    : planned.length > 0
      ? `step ${planned[0]}: no straight way was found`
      : `${counted(moves, 'straight move')} free, ${rays} rays`;
  return {
    check: 'Ways of assembly are free',
    measured,
    limit: 'nothing in the way of any move',
    passed: !first && planned.length === 0,
  };
}

function zonesStayWhole({ zones, leastMm, nearest, crossed }: ZoneClearance): ProofRow {
  return {
    check: 'Keep-whole zones are whole',
    measured:
      crossed.length > 0
        ? `seams in ${crossed.map((name) => `“${name}”`).join(', ')}`
        : leastMm === Infinity
          ? `no seam near ${counted(zones, 'zone')}`
          : `nearest seam ${length(leastMm)} mm from “${nearest}”`,
    limit: 'no seam inside any of them',
    passed: crossed.length === 0,
  };
}

function volumesAddUp(
  pieces: readonly WrittenPiece[],
  { modelVolumeMm3, addedMm3 }: ProofInput,
): ProofRow {
  const total = sum(pieces.map((piece) => piece.volumeMm3));
  const wanted = modelVolumeMm3 + addedMm3;
  const difference = Math.abs(total - wanted) / modelVolumeMm3;
  const joints = addedMm3 === 0 ? '' : `, joints and marks ${shown(addedMm3)} mm³`;
  return {
    check: 'Volumes add up to the model',
    measured: `${shown(total)} of ${shown(wanted)} mm³${joints}, difference ${difference.toExponential(1)}`,
    limit: `difference at most ${VOLUME_TOLERANCE.toExponential(0)} of the model`,
    passed: difference <= VOLUME_TOLERANCE,
  };
}

/** How far the piece sticks out of the build volume where it does so most, mm; negative is room left. */
function overhangMm(piece: WrittenPiece, space: BuildSpace): number {
  // Resting on the bed is no lack of room; sinking into it is.
  const sunk = piece.min[2] < 0 ? -piece.min[2] : -Infinity;
  const vertical = Math.max(piece.max[2] - space.heightMm, sunk);
  if (space.shape === 'round') return Math.max(vertical, piece.radiusMm - space.diameterMm / 2);
  return Math.max(
    vertical,
    -piece.min[0],
    piece.max[0] - space.widthMm,
    -piece.min[1],
    piece.max[1] - space.depthMm,
  );
}

interface Worst {
  name: string;
  value: number;
}

function worstOf(pieces: readonly WrittenPiece[], badness: (piece: WrittenPiece) => number): Worst {
  let worst: Worst = { name: 'none', value: -Infinity };
  for (const piece of pieces) {
    const value = badness(piece);
    if (value > worst.value || Number.isNaN(value)) worst = { name: piece.name, value };
  }
  return worst;
}
