import { capFrame, mirrorLoop } from '../../shared/geometry/features/cap-frame.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import {
  type JointChoice,
  type JointKind,
  type JointWishes,
  pinDiametersMm,
} from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type SeamRegion } from '../building/seam-areas.js';
import { regionOf } from '../solids/regions.js';
import { type CrossSection, type Solids, type SolidScope } from '../solids/solid-kernel.js';
import { makeLips, type Lip } from './backing-lip.js';
import { type Coverage } from './one-way.js';
import { halfWidth, placesInside } from './pin-places.js';
import { NearCap } from './solid-depth.js';
import { type PinSide, type PinTask, type PlacedPins, placePins, roomsOf } from './place-pins.js';
import { pinMeasures, type SeamPin, type TakenRoom } from './seam-pin.js';

/** How one seam is joined, in its own coordinates. */
export interface SeamJoint {
  readonly kind: JointKind;
  readonly reason: string;
  readonly pins: readonly SeamPin[];
  readonly lips: readonly Lip[];
  readonly notes: readonly string[];
  /** Twice the largest distance inside the joined face's edge, mm. */
  readonly wallMm: number;
}

export interface JointTask {
  /** The plain pieces, tagged, in the assembled model. */
  readonly bodies: ReadonlyMap<string, TriangleMesh>;
  readonly seams: readonly SeamRegion[];
  readonly wishes: JointWishes;
  readonly material: MaterialProfile;
  readonly solids: Solids;
  readonly onSeam?: (done: number, total: number) => void;
}

/** Faces narrower than this get a lip behind the wall where one can be made, mm. */
const LIP_BELOW_MM = 4.5;
/** A lip reaches so far behind either wall, mm; the lower one where walls lean. */
const LIP_HEIGHTS_MM = [8, 5];
/** How far beyond its height and wall a lip looks for other pieces, mm. */
const LIP_ROOM_MM = 5;
/** Twice the thickest pin, mm. */
const DEEPEST_PIN_MM = 24;
/** Faces smaller than this get no joint, mm². */
const LEAST_JOINED_MM2 = 12;
/** Printed pins are no thinner, mm; what is thinner is cut from rod (common practice, from memory). */
const LEAST_PRINTED_MM = 3;
/** A pin's diameter to the square root of the joined area (common practice, no source). */
const PIN_TO_SIDE = 0.09;
/** A pin's share of the wall at most: a third to a half (common practice, from memory). */
const PIN_TO_WALL = 0.5;

/**
 * Chooses and places a joint for every seam: by the thickness of the joined face and its area
 * unless the person chose. Pins of neighbouring seams keep clear of each other; larger seams are
 * served first. Deterministic. Seams without room get none, and a note says why.
 * @returns in the order of the seams
 */
export function planJoints(task: JointTask): SeamJoint[] {
  const taken = new Map<string, TakenRoom[]>();
  const roomsFor = (name: string) => {
    const rooms = taken.get(name) ?? [];
    taken.set(name, rooms);
    return rooms;
  };
  const lipRooms: TakenRoom[] = [];
  const middle = middleOf([...task.bodies.values()]);
  const joints: SeamJoint[] = new Array<SeamJoint>(task.seams.length);
  const order = task.seams.map((_, k) => k);
  order.sort((a, b) => task.seams[b].areaMm2 - task.seams[a].areaMm2 || a - b);
  for (const [done, k] of order.entries()) {
    task.onSeam?.(done, order.length);
    const seam = task.seams[k];
    joints[k] = task.solids.withSolids((scope) => {
      // Pins and lips keep farther from the edge than this takes off it.
      const region = scope.keep(regionOf(scope, seam.region).simplify(0.03));
      return new SeamPlanner(scope, region, seam, task, roomsFor, lipRooms, middle).plan();
    });
  }
  return joints;
}

/** The choice that holds for a seam. */
export function choiceFor(wishes: JointWishes, seam: SeamRegion): JointChoice {
  const own = wishes.seams.find(
    ({ between, cut }) =>
      cut === seam.cut && between[0] === seam.between[0] && between[1] === seam.between[1],
  );
  return own?.choice ?? wishes.usual;
}

class SeamPlanner {
  private readonly wallMm: number;
  private readonly choice: JointChoice;
  private readonly face: string;

  constructor(
    private readonly scope: SolidScope,
    private readonly region: CrossSection,
    private readonly seam: SeamRegion,
    private readonly task: JointTask,
    private readonly roomsFor: (name: string) => TakenRoom[],
    private readonly lipRooms: TakenRoom[],
    private readonly middle: readonly [number, number, number],
  ) {
    this.wallMm = 2 * halfWidth(scope, region);
    this.choice = choiceFor(task.wishes, seam);
    const area = seam.areaMm2 / 100;
    this.face =
      `the joined face is ${this.wallMm.toFixed(1)} mm thick at its thickest ` +
      `and ${area < 10 ? area.toFixed(1) : area.toFixed(0)} cm² large`;
  }

  plan(): SeamJoint {
    const { kind } = this.choice;
    if (this.seam.areaMm2 < LEAST_JOINED_MM2) return this.none('that is too little');
    if (kind === 'none') return this.result('none', 'No joint was wanted here.');
    if (kind === 'backing-lip') return this.lip() ?? this.none('no lip can stand behind its wall');
    if (kind !== null)
      return this.pinned(kind, this.diameters(kind)) ?? this.none('no pin has room in it');
    return this.byItsFace();
  }

  /** Thin walls get a lip, thick ones pins, what is between thin rods. */
  private byItsFace(): SeamJoint {
    if (this.wallMm < LIP_BELOW_MM) {
      const lip = this.lip();
      if (lip) return lip;
    }
    const printed = this.diameters('loose-pin');
    const rods = this.diameters('stock-rod');
    const placed =
      (printed.length > 0 ? this.pinned('loose-pin', printed) : null) ??
      (rods.length > 0 ? this.pinned('stock-rod', rods) : null);
    if (placed && placed.pins.length >= 2) return placed;
    const lip = this.wallMm >= LIP_BELOW_MM ? this.lip() : null;
    return lip ?? placed ?? this.none('neither a pin nor a lip has room in it');
  }

  /** Diameters worth trying, the best first: near the wanted one, then thinner. */
  private diameters(kind: JointKind): number[] {
    const { diameterMm } = this.choice;
    if (diameterMm !== null) return [diameterMm];
    const wanted = Math.max(
      LEAST_PRINTED_MM,
      Math.min(8, PIN_TO_SIDE * Math.sqrt(this.seam.areaMm2)),
    );
    const most = Math.min(wanted, PIN_TO_WALL * this.wallMm);
    return pinDiametersMm
      .filter((diameter) =>
        kind === 'stock-rod'
          ? diameter <= Math.max(1, most) && diameter < LEAST_PRINTED_MM
          : diameter >= LEAST_PRINTED_MM && diameter <= Math.max(LEAST_PRINTED_MM, most),
      )
      .reverse();
  }

  private pinned(kind: JointKind, diameters: readonly number[]): SeamJoint | null {
    let single: { placed: PlacedPins; diameterMm: number } | null = null;
    for (const diameterMm of diameters) {
      const task = this.pinTask(kind, diameterMm);
      const placed = placePins(task);
      if (!placed) continue;
      if (placed.pins.length >= 2 || task.most === 1)
        return this.take(kind, diameterMm, placed, task);
      single ??= { placed, diameterMm };
    }
    if (!single) return null;
    const { placed, diameterMm } = single;
    return this.take(kind, diameterMm, placed, this.pinTask(kind, diameterMm));
  }

  private pinTask(kind: JointKind, diameterMm: number): PinTask {
    const { material, wishes } = this.task;
    const { seam, scope, region } = this;
    const measures = pinMeasures(diameterMm, {
      lineWidthMm: material.lineWidthMm,
      edgeBevelMm: wishes.edgeBevelMm,
    });
    const clearanceMm = material.clearances.locatingMm;
    const fromEdge = (diameterMm + clearanceMm) / 2 + measures.wallMm;
    const depthMm = this.choice.depthMm ?? Math.max(2 * diameterMm, 5);
    return {
      above: this.side(seam.above, false),
      below: this.side(seam.below, true),
      plane: seam.plane,
      normal: seam.normal,
      places: placesInside(scope, region, fromEdge + 0.02, Math.max(2, diameterMm)),
      coverage: this.coverage,
      diameterMm,
      clearanceMm,
      measures,
      depthMm,
      leastDepthMm: Math.min(depthMm, Math.max(diameterMm, 3)),
      most: this.choice.most ?? 4,
      furtherMm: 90,
      isFixed: kind === 'fixed-pin',
    };
  }

  private side(name: string, isAlong: boolean): PinSide {
    const { seam, task, choice } = this;
    let near = this.nearCaps.get(name);
    if (!near) {
      const outline = seam.region.map((loop) => (isAlong ? loop : mirrorLoop(loop)));
      const deepestMm = (choice.depthMm ?? DEEPEST_PIN_MM) + 4;
      const frame = capFrame(seam.plane, seam.normal, isAlong);
      const within = Float64Array.from(outline.flatMap((loop) => [...loop]));
      near = new NearCap(task.bodies.get(name)!, seam.cut, frame, deepestMm, within);
      this.nearCaps.set(name, near);
    }
    return { near, taken: this.roomsFor(name) };
  }
  private readonly nearCaps = new Map<string, NearCap>();

  private take(
    kind: JointKind,
    diameterMm: number,
    { pins, isOneWay, isMirrorSafe }: PlacedPins,
    task: PinTask,
  ): SeamJoint {
    for (const pin of pins)
      for (const way of pin.fit === 'round' ? [0] : [-1, 1]) {
        const place = {
          x: pin.x + way * pin.reach.x,
          y: pin.y + way * pin.reach.y,
          depthMm: pin.depthsMm[0],
        };
        const [up, down] = roomsOf(place, task, task.measures);
        this.roomsFor(this.seam.above).push(up);
        this.roomsFor(this.seam.below).push(down);
      }
    const notes: string[] = [];
    const { between } = this.seam;
    if (pins.length === 1 && task.most > 1)
      notes.push(
        `Only one pin has room between ${between[0]} and ${between[1]}: it does not stop them from turning.`,
      );
    if (!isOneWay)
      notes.push(
        `${between[0]} and ${between[1]} also fit turned round: the outline and every place for pins are alike. Go by the engraved marks.`,
      );
    else if (!isMirrorSafe)
      notes.push(
        `A mirror image of ${between[0]} would fit ${between[1]} as well: mind the names.`,
      );
    const deep = pins[0].depthsMm[0].toFixed(1);
    const what =
      kind === 'stock-rod'
        ? `${counted(pins.length, 'rod')} Ø ${diameterMm} mm cut from stock`
        : `${counted(pins.length, kind === 'fixed-pin' ? 'fixed pin' : 'printed pin')} Ø ${diameterMm} mm`;
    const chosen = this.choice.kind === null ? '' : ' as asked';
    return this.result(
      kind,
      `${what}, ${deep} mm into each side${chosen}: ${this.face}.`,
      notes,
      pins,
    );
  }

  private lip(): SeamJoint | null {
    const { seam, task, scope, region } = this;
    const heights = this.choice.depthMm === null ? LIP_HEIGHTS_MM : [this.choice.depthMm];
    const near = this.nearBodies(Math.max(...heights) + LIP_ROOM_MM);
    let lips: Lip[] = [];
    for (const heightMm of heights) {
      if (lips.length > 0) break;
      lips = makeLips(scope, region, {
        seam,
        near,
        middle: this.middle,
        heightMm,
        thicknessMm: Math.max(2, 5 * task.material.lineWidthMm),
        gapMm: task.material.clearances.slidingMm / 2,
        taken: this.lipRooms,
        most: this.choice.most ?? 4,
      });
    }
    if (lips.length === 0) return null;
    const chosen = this.choice.kind === null ? '' : ' as asked';
    const lengths = lips.reduce((sum, lip) => sum + lip.lengthMm, 0);
    return this.result(
      'backing-lip',
      `${counted(lips.length, 'lip')} behind the wall, ${lengths.toFixed(0)} mm together${chosen}: ${this.face}.`,
      [],
      [],
      lips,
    );
  }

  /** Bodies whose box comes within a distance of the seam's outline. */
  private nearBodies(byMm: number): TriangleMesh[] {
    const { min, max } = boundingBox(this.seam.outline);
    return [...this.task.bodies.values()].filter(({ positions }) => {
      const box = boundingBox(positions);
      return [0, 1, 2].every(
        (axis) => box.min[axis] <= max[axis] + byMm && box.max[axis] >= min[axis] - byMm,
      );
    });
  }

  private none(why: string): SeamJoint {
    const { between } = this.seam;
    return this.result('none', `No joint: ${this.face}, and ${why}.`, [
      `${between[0]} and ${between[1]} have no joint between them: hold them in place while the glue sets.`,
    ]);
  }

  private result(
    kind: JointKind,
    reason: string,
    notes: string[] = [],
    pins: readonly SeamPin[] = [],
    lips: readonly Lip[] = [],
  ): SeamJoint {
    return { kind, reason, notes, pins, lips, wallMm: this.wallMm };
  }

  private readonly coverage: Coverage = ({ a, b, c, d, isMirrored }) => {
    const simple = (this.simple ??= this.scope.keep(this.region.simplify(0.2)));
    const second: [number, number] = isMirrored ? [b, -a] : [-b, a];
    const turned = this.scope.keep(simple.transform([a, b, 0, ...second, 0, c, d, 1]));
    return this.scope.keep(simple.intersect(turned)).area() / simple.area();
  };
  private simple: CrossSection | undefined;
}

/** Middle of the box of several bodies, mm. */
function middleOf(meshes: readonly TriangleMesh[]): [number, number, number] {
  const boxes = meshes.map(({ positions }) => boundingBox(positions));
  const middle = (axis: number) =>
    (Math.min(...boxes.map(({ min }) => min[axis])) +
      Math.max(...boxes.map(({ max }) => max[axis]))) /
    2;
  return [middle(0), middle(1), middle(2)];
}

function counted(count: number, one: string): string {
  return `${count} ${one}${count === 1 ? '' : 's'}`;
}
