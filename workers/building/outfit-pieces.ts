import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { candidateDowns } from '../../shared/geometry/fitting/candidate-downs.js';
import { type BedPose, layOnBed, poseOn } from '../../shared/geometry/fitting/lay-on-bed.js';
import { scaleMesh } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { fromPlane } from '../../shared/geometry/sections/seam-plane.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type JointWishes } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type OrientationWish } from '../../shared/jobs/recipe.js';
import { dressBody, type Finish } from '../jointing/dress-body.js';
import { planJoints, type SeamJoint } from '../jointing/plan-joints.js';
import {
  type Orientation,
  orientPiece,
  type OrientTask,
  rateAs,
} from '../orienting/orient-piece.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import { type Solids } from '../solids/solid-kernel.js';
import { addSkins } from '../skinning/add-skins.js';
import { findSkins, type Skin } from '../skinning/find-skins.js';
import { type NamedBody, type Outfit, type Version } from './finish-bodies.js';
import { findSeams, type SeamRegion } from './seam-areas.js';

export interface OutfitTask {
  /** Build spaces as the pieces are laid in them before they are enlarged. */
  readonly spaces: readonly BuildSpace[];
  readonly planesAt: (offsets: readonly number[]) => readonly Plane[];
  readonly joints: JointWishes;
  readonly material: MaterialProfile;
  /** Orientations that a person chose. */
  readonly orientations: readonly OrientationWish[];
  readonly showDirections: readonly Vector3[];
  /** Resting directions worth trying, by the body's path. */
  readonly hints: ReadonlyMap<string, Vector3>;
  /** Factor by which the written pieces are larger than the model. */
  readonly enlargement: number;
  readonly solids: Solids;
  readonly context: JobContext;
}

/** What was decided for all pieces of a plan. */
export interface PlanOutfit {
  readonly seams: readonly SeamRegion[];
  /** In the order of the seams. */
  readonly joints: readonly SeamJoint[];
  /** In the order of the bodies: the one that is used first, then others that were nearly as good. */
  readonly orientations: readonly (readonly Orientation[])[];
  /** In the order of the bodies: openings that a skin could close. */
  readonly openings: readonly number[];
  /** In the order of the bodies: what could not be done as asked. */
  readonly notes: readonly (readonly string[])[];
}

/** Support below that is no reason for a skin, mm³. */
const LEAST_SUPPORT_MM3 = 200;
/** Pieces are written plain only when nothing else can be: joints would then not meet. */
const FINISHES: readonly Finish[] = [
  { isBevelled: true, isMarked: true },
  { isBevelled: false, isMarked: true },
  { isBevelled: false, isMarked: false },
];

/**
 * Decides how every body of a plan is made: the seams with their joints, the orientation, then
 * sockets, marks and bevels to suit both. Deterministic.
 */
export async function outfitPieces(
  bodies: readonly NamedBody[],
  offsets: readonly number[],
  task: OutfitTask,
): Promise<{ outfits: Outfit[]; common: PlanOutfit }> {
  const { solids, joints: wishes, material, context } = task;
  const meshes = bodies.map(({ name, body }) => ({ name, mesh: body.mesh }));
  const seaming = portionOf(context, 0, 0.2);
  const seams = findSeams(meshes, task.planesAt(offsets), solids, (done, total) =>
    seaming.progress('Measuring the seams', done / total),
  );
  const jointing = portionOf(context, 0.2, 0.5);
  const joints = planJoints({
    bodies: new Map(meshes.map(({ name, mesh }) => [name, mesh])),
    seams,
    wishes,
    material,
    solids,
    onSeam: (done, total) => {
      context.throwIfCancelled();
      jointing.progress('Placing the joints', done / total);
    },
  });
  const outfits: Outfit[] = [];
  const orientations: Orientation[][] = [];
  const notes: string[][] = [];
  const openings: number[] = [];
  const orienting = portionOf(context, 0.5, 1);
  for (const [k, named] of bodies.entries()) {
    context.throwIfCancelled();
    orienting.progress('Finding how the pieces lie best', k / bodies.length);
    const { mesh } = named.body;
    const orientTask = orientTaskFor(named, seams, joints, task);
    const found = await orientPiece(mesh, orientTask);
    const wish = task.orientations.find(({ piece }) => piece === named.name);
    const laid = wish ? withWish(mesh, found, wish.down, orientTask) : { list: found, notes: [] };
    const chosen = laid.list[0];
    const { pose, space } = chosen
      ? { pose: poseIn(mesh, chosen, task.spaces), space: chosen.space }
      : leastOver(mesh, task.spaces);
    orientations.push(laid.list.length > 0 ? laid.list : [asItLies(mesh, orientTask, pose, space)]);
    notes.push(laid.notes);
    const up: Vector3 = [0 - pose.down[0], 0 - pose.down[1], 0 - pose.down[2]];
    const { overhangDegrees, bridgeMm } = material;
    const needsSupport = (laid.list[0]?.supportMm3 ?? Infinity) > LEAST_SUPPORT_MM3;
    const skins = needsSupport
      ? findSkins(solids, mesh, up, { overhangDegrees, bridgeMm, skinMm: wishes.skinMm })
      : [];
    openings.push(skins.length);
    const dress = (finish: Finish): Version => {
      const { name } = named;
      const dressed = dressBody({
        name,
        mesh,
        seams,
        joints,
        up,
        wishes,
        material,
        solids,
        finish,
      });
      const laid = poseOn(dressed.mesh.positions, task.spaces[space], pose.down)!;
      const version = { ...dressed, pose: laid };
      return enlarged(
        wishes.skins.includes(name) ? withSkins(version, up, skins, task) : version,
        task.enlargement,
      );
    };
    outfits.push({
      space,
      versions: FINISHES.map((finish) => () => dress(finish)),
    });
  }
  return { outfits, common: { seams, joints, orientations, notes, openings } };
}

function orientTaskFor(
  { name, body }: NamedBody,
  seams: readonly SeamRegion[],
  joints: readonly SeamJoint[],
  task: OutfitTask,
): OrientTask {
  const socketAxes: Vector3[] = [];
  const pinAxes: Vector3[] = [];
  const ends: number[] = [];
  for (const [k, { above, below, normal, plane }] of seams.entries()) {
    if (above !== name && below !== name) continue;
    const outward: Vector3 =
      below === name ? normal : [0 - normal[0], 0 - normal[1], 0 - normal[2]];
    const hasPins = joints[k].kind === 'fixed-pin' && below === name;
    for (const pin of joints[k].pins) {
      (hasPins ? pinAxes : socketAxes).push(outward);
      if (!hasPins) continue;
      const radius = pin.diameterMm / 2;
      for (const [dx, dy] of [
        [radius, 0],
        [-radius, 0],
        [0, radius],
        [0, -radius],
      ])
        ends.push(
          ...fromPlane(plane, pin.x + dx, pin.y + dy).map(
            (at, axis) => at + pin.depthsMm[0] * outward[axis],
          ),
        );
    }
  }
  const { overhangDegrees, bridgeMm } = task.material;
  const { spaces, showDirections } = task;
  const alsoInside = Float64Array.from(ends);
  const hint = task.hints.get(body.path);
  return {
    overhangDegrees,
    bridgeMm,
    showDirections,
    socketAxes,
    pinAxes,
    spaces,
    alsoInside,
    hints: hint ? [hint] : [],
  };
}

/** The person's orientation first when it fits, with the reason when it does not. */
function withWish(
  mesh: TriangleMesh,
  found: readonly Orientation[],
  down: Vector3,
  task: OrientTask,
): { list: Orientation[]; notes: string[] } {
  const points = withEnds(mesh.positions, task.alsoInside);
  const space = task.spaces.findIndex((one) => poseOn(points, one, down)?.fits ?? false);
  if (space < 0)
    return {
      list: [...found],
      notes: [
        'The orientation that was chosen does not fit the build volume: the best one is used.',
      ],
    };
  const wanted = { ...rateAs(mesh, task, down), space };
  const others = found.filter((one) => one.down.some((part, k) => Math.abs(part - down[k]) > 1e-6));
  return { list: [wanted, ...others], notes: [] };
}

function asItLies(
  mesh: TriangleMesh,
  task: OrientTask,
  { down }: BedPose,
  space: number,
): Orientation {
  return { ...rateAs(mesh, task, down), space };
}

function poseIn(mesh: TriangleMesh, { down, space }: Orientation, spaces: readonly BuildSpace[]) {
  return poseOn(mesh.positions, spaces[space], down)!;
}

/** Of a piece that no orientation makes fit: the pose that is over by least. */
function leastOver(mesh: TriangleMesh, spaces: readonly BuildSpace[]) {
  const downs = candidateDowns(mesh);
  const poses = spaces.map((space) => layOnBed(mesh.positions, space, downs));
  const first = poses.findIndex((pose) => pose.fits);
  const least = poses.reduce((a, b, k) => (b.slackMm > poses[a].slackMm ? k : a), 0);
  const space = first >= 0 ? first : least;
  return { pose: poses[space], space };
}

function withEnds(points: Float64Array, ends: Float64Array | undefined): Float64Array {
  if (!ends || ends.length === 0) return points;
  const all = new Float64Array(points.length + ends.length);
  all.set(points);
  all.set(ends, points.length);
  return all;
}

/** The piece with its openings closed; skins count as added, and each is told. */
function withSkins(
  version: Version,
  up: Vector3,
  skins: readonly Skin[],
  { solids, joints: { skinMm } }: OutfitTask,
): Version {
  const { positions } = version.mesh;
  let plateMm = Infinity;
  for (let k = 0; k < positions.length; k += 3)
    plateMm = Math.min(
      plateMm,
      positions[k] * up[0] + positions[k + 1] * up[1] + positions[k + 2] * up[2],
    );
  const { mesh, addedMm3, notes } = addSkins(solids, version.mesh, up, skins, { skinMm, plateMm });
  return {
    ...version,
    mesh,
    featuresMm3: version.featuresMm3 + addedMm3,
    notes: [...version.notes, ...notes],
  };
}

function enlarged(version: Version, factor: number): Version {
  if (factor === 1) return version;
  const cube = factor ** 3;
  return {
    ...version,
    mesh: scaleMesh(version.mesh, factor),
    pose: enlargedPose(version.pose, factor),
    featuresMm3: cube * version.featuresMm3,
    bevelMm3: cube * version.bevelMm3,
  };
}

/** The pose of the enlarged piece in the enlarged space. */
function enlargedPose(pose: BedPose, factor: number): BedPose {
  if (factor === 1) return pose;
  const motion = pose.motion.map((value, k) =>
    k % 4 === 3 ? factor * value : value,
  ) as unknown as BedPose['motion'];
  return { ...pose, motion, slackMm: factor * pose.slackMm };
}
