import { type CapFeature } from '../../shared/geometry/features/cap-feature.js';
import { type CapFrame } from '../../shared/geometry/features/cap-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { dot } from '../../shared/geometry/vectors/vector3.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { pinShape, type PlanePoint, socketShape } from './outlines.js';
import { type SeamJoint } from './plan-joints.js';
import { type PinMeasures, pinMeasures, type SeamPin } from './seam-pin.js';

/** Sockets whose axis is nearer to level than this get a roof: sin 45°. */
const LEVEL_SIN = Math.SQRT1_2;

export interface PinFeatureTask {
  /** Of the cap that the features are for. */
  readonly frame: CapFrame;
  readonly isAbove: boolean;
  /** Build direction of the piece in the assembled model; null when it is not known yet. */
  readonly up: Vector3 | null;
  readonly material: MaterialProfile;
  readonly edgeBevelMm: number;
}

/** The sockets (or fixed pins) of a joint in the cap of one of its two pieces. */
export function pinFeatures(joint: SeamJoint, task: PinFeatureTask): CapFeature[] {
  return joint.pins.map((pin) => {
    const measures = pinMeasures(pin.diameterMm, {
      lineWidthMm: task.material.lineWidthMm,
      edgeBevelMm: task.edgeBevelMm,
    });
    const isFixed = joint.kind === 'fixed-pin';
    return isFixed && !task.isAbove
      ? fixedPin(pin, measures)
      : socket(pin, isFixed, measures, task);
  });
}

/** Whether a pin may move in the socket of a piece: in the piece below, or above a fixed pin. */
function hasReach(isFixed: boolean, isAbove: boolean): boolean {
  return isFixed === isAbove;
}

/** Diametral clearance of a socket, mm. */
export function socketClearance(
  pin: SeamPin,
  isAbove: boolean,
  isFixed: boolean,
  { clearances }: MaterialProfile,
): number {
  const isLoose = pin.fit === 'loose' && hasReach(isFixed, isAbove);
  return isLoose ? clearances.looseMm : clearances.locatingMm;
}

function socket(
  pin: SeamPin,
  isFixed: boolean,
  measures: PinMeasures,
  { frame, isAbove, up, material }: PinFeatureTask,
): CapFeature {
  const radiusMm = (pin.diameterMm + socketClearance(pin, isAbove, isFixed, material)) / 2;
  const reach = hasReach(isFixed, isAbove) ? inCap(pin.reach, isAbove) : { x: 0, y: 0 };
  const ring = socketShape(inCap(pin, isAbove), reach, roofOf(frame, up));
  const deep = pin.depthsMm[isAbove ? 0 : 1] + measures.glueRoomMm;
  return {
    levels: [
      { loops: [ring(radiusMm + measures.leadInMm)], depthMm: 0 },
      { loops: [ring(radiusMm)], depthMm: measures.leadInMm },
      { loops: [ring(radiusMm)], depthMm: deep },
    ],
  };
}

function fixedPin(pin: SeamPin, { leadInMm }: PinMeasures): CapFeature {
  const ring = pinShape(inCap(pin, false));
  const radiusMm = pin.diameterMm / 2;
  const high = pin.depthsMm[0];
  return {
    levels: [
      { loops: [ring(radiusMm)], depthMm: 0 },
      { loops: [ring(radiusMm)], depthMm: leadInMm - high },
      { loops: [ring(radiusMm - leadInMm)], depthMm: -high },
    ],
  };
}

/** Coordinates of the seam in the cap of the piece above (which looks the other way) or below. */
export function inCap({ x, y }: PlanePoint, isAbove: boolean): PlanePoint {
  return isAbove ? { x, y: 0 - y } : { x, y };
}

function roofOf({ u, v, outward }: CapFrame, up: Vector3 | null): PlanePoint | null {
  if (!up || Math.abs(dot(up, outward)) >= LEVEL_SIN) return null;
  const [x, y] = [dot(up, u), dot(up, v)];
  const length = Math.hypot(x, y);
  return { x: x / length, y: y / length };
}
