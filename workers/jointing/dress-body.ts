import { type CapFeature } from '../../shared/geometry/features/cap-feature.js';
import { capFrame, mirrorLoop } from '../../shared/geometry/features/cap-frame.js';
import { type CapTools, reworkCap } from '../../shared/geometry/features/rework-cap.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type JointWishes } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type SeamRegion } from '../building/seam-areas.js';
import { insetOverlap } from '../solids/regions.js';
import { type Solids } from '../solids/solid-kernel.js';
import { inCap, pinFeatures } from './pin-features.js';
import { markFeature } from './place-marks.js';
import { type SeamJoint } from './plan-joints.js';
import { pinMeasures } from './seam-pin.js';

/** How much of the finish a piece gets; less is tried when more cannot be written soundly. */
export interface Finish {
  readonly isBevelled: boolean;
  readonly isMarked: boolean;
}

export interface DressTask {
  readonly name: string;
  /** The plain piece, tagged, in the assembled model. */
  readonly mesh: TriangleMesh;
  readonly seams: readonly SeamRegion[];
  /** In the order of the seams. */
  readonly joints: readonly SeamJoint[];
  /** Build direction in the assembled model. */
  readonly up: Vector3;
  readonly wishes: JointWishes;
  readonly material: MaterialProfile;
  readonly solids: Solids;
  readonly finish: Finish;
}

export interface DressedBody {
  readonly mesh: TriangleMesh;
  /** What sockets, pins and marks add to the piece (mostly negative), mm³. */
  readonly featuresMm3: number;
  /** What bevels take away, mm³. */
  readonly bevelMm3: number;
  readonly notes: readonly string[];
}

/**
 * A piece with everything on its seam faces: sockets or pins, engraved marks, bevelled edges. A
 * face with no seam stays as it is. The plain piece is not changed.
 */
export function dressBody(task: DressTask): DressedBody {
  const { solids, wishes, finish } = task;
  const tools: CapTools = {
    triangulate: solids.triangulate,
    inset: (one, other, byMm) => insetOverlap(solids, one, other, byMm),
  };
  const bevelMm = finish.isBevelled ? wishes.edgeBevelMm : 0;
  const notes: string[] = [];
  const unmarked: string[] = [];
  let mesh = task.mesh;
  let featuresMm3 = 0;
  let bevelMm3 = 0;
  for (const cut of cutsOf(task)) {
    const { frame, features } = facesOf(task, cut, unmarked);
    const made = reworkCap(mesh, { tag: cut, frame, features, bevelMm }, tools);
    if (bevelMm > 0 && !made.isBevelled)
      notes.push(`The seam edge at cut ${cut} stays sharp: it is too thin there.`);
    mesh = made.mesh;
    featuresMm3 += made.featuresMm3;
    bevelMm3 += made.bevelMm3;
  }
  if (unmarked.length > 0)
    notes.push(`No room for marks where it meets ${[...new Set(unmarked)].join(', ')}.`);
  return { mesh, featuresMm3, bevelMm3, notes };
}

/** Cuts at which the piece has seams, by rising number. */
function cutsOf({ name, seams }: DressTask): number[] {
  const own = seams.filter(({ above, below }) => above === name || below === name);
  return [...new Set(own.map(({ cut }) => cut))].sort((a, b) => a - b);
}

/** Everything on the cap of one cut, in its frame. */
function facesOf(task: DressTask, cut: number, unmarked: string[]) {
  const { name, seams, joints, wishes } = task;
  const own = seams
    .map((seam, k) => ({ seam, joint: joints[k] }))
    .filter(({ seam }) => seam.cut === cut && (seam.above === name || seam.below === name));
  const { seam: first } = own[0];
  const frame = capFrame(first.plane, first.normal, first.below === name);
  const features: CapFeature[] = [];
  for (const { seam, joint } of own) {
    const isAbove = seam.above === name;
    const { material, up } = task;
    const pinTask = { frame, isAbove, up, material, edgeBevelMm: wishes.edgeBevelMm };
    features.push(...pinFeatures(joint, pinTask));
    if (!task.finish.isMarked || !wishes.areMarked) continue;
    const neighbour = isAbove ? seam.below : seam.above;
    const mark = markFeature(task.solids, {
      frame,
      region: isAbove ? seam.region.map(mirrorLoop) : seam.region,
      edgeBevelMm: wishes.edgeBevelMm,
      obstacles: joint.pins.flatMap((pin) => obstaclesOf(pin, isAbove, task)),
      name,
      neighbour,
    });
    if (mark) features.push(mark);
    else unmarked.push(neighbour);
  }
  return { frame, features };
}

function obstaclesOf(
  pin: SeamJoint['pins'][number],
  isAbove: boolean,
  { material, wishes }: DressTask,
) {
  const { leadInMm } = pinMeasures(pin.diameterMm, {
    lineWidthMm: material.lineWidthMm,
    edgeBevelMm: wishes.edgeBevelMm,
  });
  const radiusMm = 1.09 * ((pin.diameterMm + material.clearances.looseMm) / 2 + leadInMm);
  return [-1, 0, 1].map((way) => ({
    ...inCap({ x: pin.x + way * pin.reach.x, y: pin.y + way * pin.reach.y }, isAbove),
    radiusMm,
  }));
}
