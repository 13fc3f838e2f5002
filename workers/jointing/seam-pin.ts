import { type PlanePoint } from './outlines.js';

/** A pin across a seam, in the seam's coordinates, mm. */
export interface SeamPin extends PlanePoint {
  readonly diameterMm: number;
  /** Round finds the place, a slot lets the size be a little off along one line, loose only keeps order. */
  readonly fit: 'round' | 'slotted' | 'loose';
  /** How far the pin may move either way in the socket of the piece below. */
  readonly reach: PlanePoint;
  /** How far the pin goes into the piece above and into the one below. */
  readonly depthsMm: readonly [above: number, below: number];
}

/** Measures of a pin's surroundings that all its users share, mm. */
export interface PinMeasures {
  /** Material left round a socket. */
  readonly wallMm: number;
  /** Width and depth of the lead-in at a socket's mouth. */
  readonly leadInMm: number;
  /** How much deeper than the pin a socket is: room for glue. */
  readonly glueRoomMm: number;
  /** Material left under a socket's floor. */
  readonly floorMm: number;
}

/**
 * Two line widths round a socket, 0.8 mm at least, more for large pins, and enough that its mouth
 * with a roof keeps clear of the seam's bevelled edge; a lead-in of 0.5 mm, 0.2 mm for thin rods;
 * 0.8 mm deeper than the pin (common practice, from memory).
 */
export function pinMeasures(
  diameterMm: number,
  { lineWidthMm, edgeBevelMm }: { lineWidthMm: number; edgeBevelMm: number },
): PinMeasures {
  const isThin = diameterMm < 3;
  const leadInMm = isThin ? 0.2 : 0.5;
  const mouth = diameterMm / 2 + leadInMm;
  return {
    wallMm: Math.max(
      Math.max(isThin ? 0.8 : 1.1, 2 * lineWidthMm) + ROOF_OVER * (diameterMm / 2),
      leadInMm + edgeBevelMm + 0.15 + ROOF_OVER * mouth,
    ),
    leadInMm,
    glueRoomMm: 0.8,
    floorMm: Math.max(0.8, 2 * lineWidthMm),
  };
}

/** How much farther a roof's corners reach than its circle. */
const ROOF_OVER = 0.09;

/** A cylinder that other sockets of the same piece must keep clear of, mm, assembled model. */
export interface TakenRoom {
  readonly from: readonly [number, number, number];
  readonly to: readonly [number, number, number];
  readonly radiusMm: number;
}

/** Whether two cylinders, taken as capsules, come into each other. */
export function roomsMeet(a: TakenRoom, b: TakenRoom): boolean {
  return segmentDistance(a, b) < a.radiusMm + b.radiusMm;
}

/**
 * Distance of two segments, after C. Ericson, Real-Time Collision Detection, 2005, section 5.1.9
 * (from memory): the nearest points of the lines, held back to the segments.
 */
function segmentDistance(a: TakenRoom, b: TakenRoom): number {
  const d1 = [0, 1, 2].map((k) => a.to[k] - a.from[k]);
  const d2 = [0, 1, 2].map((k) => b.to[k] - b.from[k]);
  const r = [0, 1, 2].map((k) => a.from[k] - b.from[k]);
  const dot = (p: readonly number[], q: readonly number[]) =>
    p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
  const hold = (value: number) => Math.min(1, Math.max(0, value));
  const [aa, ee, f, c, bb] = [dot(d1, d1), dot(d2, d2), dot(d2, r), dot(d1, r), dot(d1, d2)];
  const spread = aa * ee - bb * bb;
  let s = spread > 0 ? hold((bb * f - c * ee) / spread) : 0;
  let t = ee > 0 ? (bb * s + f) / ee : 0;
  if (t < 0 || t > 1) {
    t = hold(t);
    s = aa > 0 ? hold((bb * t - c) / aa) : 0;
  }
  return Math.hypot(...[0, 1, 2].map((k) => r[k] + s * d1[k] - t * d2[k]));
}
