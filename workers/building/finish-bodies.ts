import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type BedPose } from '../../shared/geometry/fitting/lay-on-bed.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type Body } from '../../shared/geometry/cutting/apply-tree.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { connectedShells } from '../../shared/geometry/mesh/shells.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext } from '../runtime/job-context.js';
import { PLACES_TRIED, roundOnBed, type RoundedPiece } from './round-on-bed.js';

/** A body with its name; numbered bottom to top of the assembled model. */
export interface NamedBody {
  /** From 1. */
  readonly item: number;
  /** `P01` … or `P001` … when there are a hundred or more. */
  readonly name: string;
  readonly body: Body;
  /** Middle of its box in the assembled model, mm. */
  readonly centreMm: [number, number, number];
}

/** A piece ready to be written: what the body became, and where it lies. */
export interface Version {
  readonly mesh: TriangleMesh;
  /** How this mesh lies: a bevel may take away the corner that it stood on. */
  readonly pose: BedPose;
  /** What sockets, pins and marks add, and what bevels take away, mm³ of this mesh. */
  readonly featuresMm3: number;
  readonly bevelMm3: number;
  readonly notes: readonly string[];
}

/** How a body is to be made. */
export interface Outfit {
  /** Number of the space that the poses are for. */
  readonly space: number;
  /** The fullest first; another is made only when the ones before cannot be written soundly. */
  readonly versions: readonly (() => Version)[];
}

/** Decides how all bodies of a plan are made; `common` is what it found out on the way. */
export type Outfitter<Common> = (
  bodies: readonly NamedBody[],
  offsets: readonly number[],
) => Promise<{ outfits: readonly Outfit[]; common: Common }>;

/** A body with its place on the bed and its rounded mesh there. */
export interface FinishedPiece extends RoundedPiece, NamedBody {
  /** Whether the pose lies inside its build space. */
  readonly fits: boolean;
  readonly space: number;
  /** The resting direction, in the assembled model. */
  readonly down: Vector3;
  /** What it was made into. */
  readonly version: Version;
}

/** Bodies and the offsets (mm) their cuts were made at, numbered as in the tree. */
export interface CutBodies {
  bodies: readonly Body[];
  offsets: readonly number[];
}

export interface FinishedPieces<Common> {
  pieces: FinishedPiece[];
  /** Offsets of the cuts as in the pieces: the given ones unless cuts had to be moved. */
  offsets: readonly number[];
  /** One sentence for each piece that could not be made sound. Empty when all is well. */
  failures: string[];
  common: Common;
}

/** How far a cut may be moved from where it was when rounding cannot close a piece, mm. */
export const FARTHEST_RECUT_MM = 0.02;
const RECUTS_TRIED = 3;

/**
 * Turns cut bodies into pieces: named bottom to top, outfitted, laid on the bed, rounded to what a
 * file can hold, checked to be closed and whole after rounding. A body that no place on the bed and
 * no simpler version closes makes its own cuts move by up to {@link FARTHEST_RECUT_MM} and
 * everything be cut again; what fails after that is kept and said in `failures`.
 * @param recut cuts the model again at these offsets (mm)
 * @param locked numbers (from 0) of cuts that must not move
 */
export async function finishBodies<Common>(
  cut: CutBodies,
  spaces: readonly BuildSpace[],
  {
    outfit,
    recut,
  }: {
    outfit: Outfitter<Common>;
    recut: (offsets: readonly number[]) => CutBodies;
  },
  context: JobContext,
  locked: ReadonlySet<number> = new Set(),
): Promise<FinishedPieces<Common>> {
  const attempt = async ({ bodies, offsets }: CutBodies) => {
    const named = nameBodies(bodies);
    const { outfits, common } = await outfit(named, offsets);
    const pieces = named.map((body, index) => {
      context.throwIfCancelled();
      context.progress('Finishing the pieces', index / named.length);
      return finishOne(body, outfits[index], spaces);
    });
    return { pieces, offsets, common };
  };
  let best = await attempt(cut);
  for (let tries = 1; tries <= RECUTS_TRIED && best.pieces.some(isUnsound); tries++) {
    const unsound = best.pieces.filter(isUnsound).map(({ body }) => body);
    const moved = nudged(cut.offsets, cutsAround(unsound, locked), tries);
    if (!moved) break;
    const again = await attempt(recut(moved));
    if (!isWorse(again.pieces, best.pieces)) best = again;
  }
  const failures = best.pieces.filter(isUnsound).map(failureSentence);
  return { ...best, failures };
}

function finishOne(
  body: NamedBody,
  { space, versions }: Outfit,
  spaces: readonly BuildSpace[],
): FinishedPiece {
  let first: FinishedPiece | undefined;
  for (const make of versions) {
    const version = make();
    const { pose } = version;
    const rounded = roundOnBed(version.mesh, pose, spaces[space]);
    const isOfOneKind = shellsOf(version.mesh) === shellsOf(body.body.mesh);
    const piece = {
      ...body,
      ...rounded,
      ...(!isOfOneKind && { sound: false, fault: 'a joint parts or closes its surface' }),
      version,
      fits: pose.fits,
      space,
      down: pose.down,
    };
    if (piece.sound) return piece;
    first ??= piece;
  }
  return first!;
}

function shellsOf(mesh: TriangleMesh): number {
  return connectedShells(mesh).count;
}

function isUnsound(piece: RoundedPiece): boolean {
  return !piece.sound;
}

/** More unsound pieces, or more that do not fit: the recut is not taken. */
function isWorse(next: readonly FinishedPiece[], now: readonly FinishedPiece[]): boolean {
  const over = (pieces: readonly FinishedPiece[]) => pieces.filter((piece) => !piece.fits).length;
  return next.filter(isUnsound).length >= now.filter(isUnsound).length || over(next) > over(now);
}

/** Indices (from 0) of the cuts that left a cap on any of the bodies and may be moved. */
function cutsAround(bodies: readonly Body[], locked: ReadonlySet<number>): Set<number> {
  const cuts = new Set<number>();
  for (const { mesh } of bodies) for (const tag of mesh.tags ?? []) if (tag > 0) cuts.add(tag - 1);
  for (const cut of locked) cuts.delete(cut);
  return cuts;
}

/** The offsets with these cuts moved, another way at each attempt; undefined when there is none to move. */
function nudged(
  offsets: readonly number[],
  cuts: ReadonlySet<number>,
  attempt: number,
): number[] | undefined {
  if (cuts.size === 0) return undefined;
  const share = ((attempt + 1) >> 1) / ((RECUTS_TRIED + 1) >> 1);
  const shift = FARTHEST_RECUT_MM * share * (attempt % 2 === 1 ? 1 : -1);
  return offsets.map((offset, index) => (cuts.has(index) ? offset + shift : offset));
}

/** Names and numbers bodies bottom to top of the assembled model. */
export function nameBodies(bodies: readonly Body[]): NamedBody[] {
  const digits = bodies.length < 100 ? 2 : 3;
  return bodies
    .map((body) => ({ body, centreMm: centreOf(body) }))
    .sort((a, b) => compareCentres(a.centreMm, b.centreMm) || comparePaths(a.body, b.body))
    .map(({ body, centreMm }, index) => ({
      item: index + 1,
      name: `P${String(index + 1).padStart(digits, '0')}`,
      body,
      centreMm,
    }));
}

function centreOf({ mesh }: Body): [number, number, number] {
  const { min, max } = boundingBox(mesh.positions);
  return [(min[0] + max[0]) / 2, (min[1] + max[1]) / 2, (min[2] + max[2]) / 2];
}

/** Upward, then away, then to the right, by whole millimetres so that rounding does not reorder a layer. */
function compareCentres(a: readonly number[], b: readonly number[]): number {
  for (const axis of [2, 1, 0]) {
    const difference = Math.round(a[axis]) - Math.round(b[axis]);
    if (difference !== 0) return difference;
  }
  return 0;
}

function comparePaths(a: Body, b: Body): number {
  return a.path < b.path ? -1 : a.path > b.path ? 1 : 0;
}

function failureSentence({ name, fault }: FinishedPiece): string {
  return (
    `${name} cannot be written soundly: ${fault} once its coordinates are rounded, ` +
    `in ${PLACES_TRIED} places on the bed and with its cuts moved by up to ${FARTHEST_RECUT_MM} mm.`
  );
}
