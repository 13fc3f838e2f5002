import { type PlanePoint } from './outlines.js';

/** A pin's place in a pattern; pins of another kind do not fit each other's sockets. */
export interface PatternPin extends PlanePoint {
  readonly kind: string;
}

/** A motion of the plane: (x, y) → (a·x − s·b·y + c, b·x + s·a·y + d), s = −1 for mirrored. */
export interface PlaneMotion {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
  readonly isMirrored: boolean;
}

/** Share of the outline that still covers itself: it then looks the same to a hand. */
const SAME_OUTLINE = 0.97;
/** Turns and mirrors tried about a single pin. */
const TURNS = 36;

/** The share of a region that it still covers after a motion, 0 to 1. */
export type Coverage = (motion: PlaneMotion) => number;

/**
 * Turns and mirrors, other than none at all, that take the outline to itself (nearly) and every
 * pin to within `playMm` of a pin of the same kind: in these the pieces could be joined wrongly.
 * `mirrored` ones only confuse a piece with its mirror image. No pins: nothing is told apart, and
 * nothing is found.
 */
export function wrongFits(
  pins: readonly PatternPin[],
  playMm: number,
  coverage: Coverage,
): PlaneMotion[] {
  return candidateMotions(pins, playMm).filter(
    (motion) =>
      !isIdentity(motion, pins) &&
      pins.every((pin) => hasPartner(moved(motion, pin), pin.kind, pins, playMm)) &&
      coverage(motion) >= SAME_OUTLINE,
  );
}

export function moved({ a, b, c, d, isMirrored }: PlaneMotion, { x, y }: PlanePoint): PlanePoint {
  const w = isMirrored ? -y : y;
  return { x: a * x - b * w + c, y: b * x + a * w + d };
}

function candidateMotions(pins: readonly PatternPin[], playMm: number): PlaneMotion[] {
  if (pins.length === 0) return [];
  const motions: PlaneMotion[] = [];
  if (pins.length === 1) {
    for (const isMirrored of [false, true])
      for (let k = 0; k < TURNS; k++) {
        const angle = (2 * Math.PI * k) / TURNS;
        motions.push(about(pins[0], pins[0], angle, isMirrored));
      }
    return motions;
  }
  const [first, second] = pins;
  for (const i of pins)
    for (const j of pins) {
      if (i === j || i.kind !== first.kind || j.kind !== second.kind) continue;
      const wanted = Math.hypot(second.x - first.x, second.y - first.y);
      if (Math.abs(Math.hypot(j.x - i.x, j.y - i.y) - wanted) > 2 * playMm) continue;
      for (const isMirrored of [false, true]) {
        const from = Math.atan2(second.y - first.y, second.x - first.x);
        const to = Math.atan2(j.y - i.y, j.x - i.x);
        const angle = isMirrored ? to + from : to - from;
        const middle = { x: (first.x + second.x) / 2, y: (first.y + second.y) / 2 };
        motions.push(about(middle, { x: (i.x + j.x) / 2, y: (i.y + j.y) / 2 }, angle, isMirrored));
      }
    }
  return motions;
}

/** Turns (and mirrors, first) about `from` and takes it to `to`. */
function about(from: PlanePoint, to: PlanePoint, angle: number, isMirrored: boolean): PlaneMotion {
  const bare = { a: Math.cos(angle), b: Math.sin(angle), c: 0, d: 0, isMirrored };
  const at = moved(bare, from);
  return { ...bare, c: to.x - at.x, d: to.y - at.y };
}

function isIdentity(motion: PlaneMotion, pins: readonly PatternPin[]): boolean {
  if (motion.isMirrored) return false;
  return (
    Math.abs(motion.b) < 1e-6 &&
    motion.a > 0 &&
    pins.every((pin) => {
      const at = moved(motion, pin);
      return Math.hypot(at.x - pin.x, at.y - pin.y) < 1e-6;
    })
  );
}

function hasPartner(
  { x, y }: PlanePoint,
  kind: string,
  pins: readonly PatternPin[],
  playMm: number,
): boolean {
  return pins.some((pin) => pin.kind === kind && Math.hypot(pin.x - x, pin.y - y) <= playMm);
}
