import { candidateDowns } from '../../shared/geometry/fitting/candidate-downs.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type BedPose, layOnBed, poseOn } from '../../shared/geometry/fitting/lay-on-bed.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type Body } from '../../shared/geometry/cutting/apply-tree.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type JobContext } from '../runtime/job-context.js';
import { PLACES_TRIED, roundOnBed, type RoundedPiece } from './round-on-bed.js';

/** A body with its name, its place on the bed and its rounded mesh there. */
export interface FinishedPiece extends RoundedPiece {
  /** From 1, bottom to top of the assembled model. */
  item: number;
  /** `P01` … or `P001` … when there are a hundred or more. */
  name: string;
  body: Body;
  /** Whether the pose lies inside its build space. */
  fits: boolean;
  /** Number of that space. */
  space: number;
  /** The resting direction, in the assembled model. */
  down: Vector3;
  /** Middle of its box in the assembled model, mm. */
  centreMm: [number, number, number];
}

/** Bodies and the offsets (mm) their cuts were made at, numbered as in the tree. */
export interface CutBodies {
  bodies: readonly Body[];
  offsets: readonly number[];
}

export interface FinishedPieces {
  pieces: FinishedPiece[];
  /** Offsets of the cuts as in the pieces: the given ones unless cuts had to be moved. */
  offsets: readonly number[];
  /** One sentence for each piece that could not be made sound. Empty when all is well. */
  failures: string[];
}

/** How a body, by its path, is to lie: what the planner found best. */
export type WantedPoses = ReadonlyMap<string, { readonly down: Vector3; readonly space: number }>;

/** How far a cut may be moved from where it was when rounding cannot close a piece, mm. */
export const FARTHEST_RECUT_MM = 0.02;
const RECUTS_TRIED = 3;

/**
 * Turns cut bodies into pieces: laid on the bed, rounded to what a file can hold, checked to be
 * closed and whole after rounding, named bottom to top. A body that no place on the bed closes makes
 * its own cuts move by up to {@link FARTHEST_RECUT_MM} and everything be cut again; what fails after
 * that is kept and said in `failures`.
 * @param spaces a body goes to the first that holds it
 * @param recut cuts the model again at these offsets (mm)
 * @param wanted tried before anything else
 * @param locked numbers (from 0) of cuts that must not move
 */
export function finishBodies(
  cut: CutBodies,
  spaces: readonly BuildSpace[],
  recut: (offsets: readonly number[]) => CutBodies,
  context: JobContext,
  {
    wanted = new Map(),
    locked = new Set(),
  }: { wanted?: WantedPoses; locked?: ReadonlySet<number> } = {},
): FinishedPieces {
  let bodies = cut.bodies;
  let offsets = cut.offsets;
  let placed = placeAll(bodies, spaces, wanted, context);
  for (let attempt = 1; attempt <= RECUTS_TRIED && placed.some(isUnsound); attempt++) {
    const moved = nudged(
      cut.offsets,
      cutsAround(
        bodies.filter((_, i) => isUnsound(placed[i])),
        locked,
      ),
      attempt,
    );
    if (!moved) break;
    const again = recut(moved);
    const placedAgain = placeAll(again.bodies, spaces, wanted, context);
    if (isWorse(placedAgain, placed)) continue;
    bodies = again.bodies;
    offsets = again.offsets;
    placed = placedAgain;
  }
  const pieces = named(bodies, placed);
  const failures = pieces.filter((piece) => !piece.sound).map(failureSentence);
  return { pieces, offsets, failures };
}

type PlacedBody = RoundedPiece & Pick<FinishedPiece, 'fits' | 'space' | 'down'>;

function placeAll(
  bodies: readonly Body[],
  spaces: readonly BuildSpace[],
  wanted: WantedPoses,
  context: JobContext,
): PlacedBody[] {
  return bodies.map(({ mesh, path }, index) => {
    context.throwIfCancelled();
    context.progress('Laying the pieces on the bed', index / bodies.length);
    const wish = wanted.get(path);
    if (wish) {
      const pose = poseOn(mesh.positions, spaces[wish.space], wish.down);
      if (pose?.fits) return placedIn(mesh, pose, spaces, wish.space);
    }
    const downs = candidateDowns(mesh);
    const poses = spaces.map((space) => layOnBed(mesh.positions, space, downs));
    const first = poses.findIndex((pose) => pose.fits);
    const least = poses.reduce((a, b, k) => (b.slackMm > poses[a].slackMm ? k : a), 0);
    const space = first >= 0 ? first : least;
    return placedIn(mesh, poses[space], spaces, space);
  });
}

function placedIn(
  mesh: Body['mesh'],
  pose: BedPose,
  spaces: readonly BuildSpace[],
  space: number,
): PlacedBody {
  const rounded = roundOnBed(mesh, pose, spaces[space]);
  return { ...rounded, fits: pose.fits, space, down: pose.down };
}

function isUnsound(piece: RoundedPiece): boolean {
  return !piece.sound;
}

/** More unsound pieces, or more that do not fit: the recut is not taken. */
function isWorse(next: readonly PlacedBody[], now: readonly PlacedBody[]): boolean {
  const over = (pieces: readonly PlacedBody[]) => pieces.filter((piece) => !piece.fits).length;
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

function named(bodies: readonly Body[], placed: readonly PlacedBody[]): FinishedPiece[] {
  const digits = bodies.length < 100 ? 2 : 3;
  return bodies
    .map((body, index) => ({ body, place: placed[index], centreMm: centreOf(body) }))
    .sort((a, b) => compareCentres(a.centreMm, b.centreMm) || comparePaths(a.body, b.body))
    .map(({ body, place, centreMm }, index) => ({
      ...place,
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
