import { fromPlane, type SeamPlane } from '../../shared/geometry/sections/seam-plane.js';
import { type Coverage, type PatternPin, wrongFits } from './one-way.js';
import { type PlanePoint } from './outlines.js';
import { type PinMeasures, roomsMeet, type SeamPin, type TakenRoom } from './seam-pin.js';
import { type Disc, type NearCap } from './solid-depth.js';

/** One of the two pieces at a seam. */
export interface PinSide {
  readonly near: NearCap;
  /** What other joints of the piece need already. */
  readonly taken: readonly TakenRoom[];
}

export interface PinTask {
  readonly above: PinSide;
  readonly below: PinSide;
  readonly plane: SeamPlane;
  /** The normal of the seam: from below to above. */
  readonly normal: readonly [number, number, number];
  readonly places: readonly PlanePoint[];
  readonly coverage: Coverage;
  readonly diameterMm: number;
  readonly clearanceMm: number;
  readonly measures: PinMeasures;
  /** How deep pins should go into either side, and how deep at least, mm. */
  readonly depthMm: number;
  readonly leastDepthMm: number;
  /** At most so many pins. */
  readonly most: number;
  /** Distance from which a further pin pays, mm. */
  readonly furtherMm: number;
  /** Whether the pin is part of the piece below: that one needs no socket. */
  readonly isFixed: boolean;
}

export interface PlacedPins {
  readonly pins: SeamPin[];
  /** Whether the pattern fits in one way only, its mirror image set aside. */
  readonly isOneWay: boolean;
  /** Whether the mirror image of the pattern is told apart as well. */
  readonly isMirrorSafe: boolean;
}

/** Size error that a slot takes up: the greater of 0.5 mm and 0.5 % (common practice, no source). */
const SIZE_ERROR_MM = 0.5;
const SIZE_ERROR_SHARE = 0.005;
/** Patterns compared before the best of them is taken. */
const PATTERNS_TRIED = 40;

/**
 * Places pins: as far apart as the solid of both sides allows, the first round, the others slotted
 * towards it, in a pattern that fits in one way only. Null when there is no place for even one.
 */
export function placePins(task: PinTask): PlacedPins | null {
  const places = usablePlaces(task);
  if (places.length === 0) return null;
  let best: PlacedPins | null = null;
  let tried = 0;
  for (const chosen of patterns(places, task)) {
    if (++tried > PATTERNS_TRIED) break;
    const pins = pinsAt(chosen, task);
    if (!pins) continue;
    const wrong = wrongFits(pins.map(asPattern), playOf(task, pins), task.coverage);
    const isMirrorSafe = wrong.length === 0;
    const isOneWay = wrong.every((motion) => motion.isMirrored);
    if (isMirrorSafe) return { pins, isOneWay, isMirrorSafe };
    if (!best || (isOneWay && !best.isOneWay)) best = { pins, isOneWay, isMirrorSafe };
  }
  return best;
}

interface Place extends PlanePoint {
  readonly depthMm: number;
}

function usablePlaces(task: PinTask): Place[] {
  const { measures, leastDepthMm } = task;
  const radiusMm = socketRadius(task);
  const depths = depthsAt(task, task.places, radiusMm);
  return task.places
    .map((place, k) => ({ ...place, depthMm: Math.min(task.depthMm, depths[k]) }))
    .filter((place) => place.depthMm >= leastDepthMm && !isTaken(place, task, measures));
}

/** Pin depth that both sides allow at each place, mm. */
function depthsAt(task: PinTask, places: readonly PlanePoint[], radiusMm: number): number[] {
  const { measures, depthMm } = task;
  const below = measures.glueRoomMm + measures.floorMm;
  const deepest = depthMm + below;
  const discs: Disc[] = places.map(({ x, y }) => ({ x, y, radiusMm }));
  const mirrored = discs.map((disc) => ({ ...disc, y: -disc.y }));
  const { above: a, below: b } = task;
  const inAbove = a.near.depths(mirrored);
  const inBelow = b.near.depths(discs);
  return places.map((_, k) => Math.min(deepest, inAbove[k], inBelow[k]) - below);
}

function socketRadius({ diameterMm, clearanceMm, measures }: PinTask): number {
  return (diameterMm + clearanceMm) / 2 + measures.wallMm;
}

/** Groups of places, the most promising first: pairs by distance (and depth), triples, single ones. */
function* patterns(places: readonly Place[], task: PinTask): Generator<Place[]> {
  const apart = 2 * task.diameterMm + 2 * task.measures.wallMm + 1;
  const pairs: { pair: [Place, Place]; worth: number }[] = [];
  for (const [k, a] of places.entries())
    for (const b of places.slice(k + 1)) {
      const distance = Math.hypot(a.x - b.x, a.y - b.y);
      if (distance < apart) continue;
      const depth = Math.min(a.depthMm, b.depthMm) / task.depthMm;
      pairs.push({ pair: [a, b], worth: distance * Math.min(1, depth) });
    }
  pairs.sort((a, b) => b.worth - a.worth);
  if (task.most >= 2) {
    // A third of the tries for the widest pairs, the rest spread over all of them.
    const third = Math.ceil(PATTERNS_TRIED / 3);
    const good = pairs.filter(({ worth }) => worth >= 0.5 * pairs[0].worth);
    const stride = Math.max(1, Math.floor((good.length - third) / third));
    const ordered = [
      ...good.slice(0, third),
      ...good.slice(third).filter((_, k) => k % stride === 0),
    ];
    for (const { pair } of ordered.slice(0, 2 * third)) yield extended(pair, places, task);
    if (task.most >= 3)
      for (const { pair } of ordered.slice(0, third))
        for (const skew of [0.4, 0.27, 0.15]) {
          const extra = thirdPlace(pair, places, apart, skew);
          if (extra) yield [...pair, extra];
        }
  }
  if (pairs.length === 0 || task.most < 2)
    for (const place of [...places].sort((a, b) => b.depthMm - a.depthMm)) yield [place];
}

/** More pins, each far from all before, where that pays. */
function extended(pair: readonly Place[], places: readonly Place[], task: PinTask): Place[] {
  const chosen = [...pair];
  while (chosen.length < task.most) {
    const gap = (place: Place) =>
      Math.min(...chosen.map((one) => Math.hypot(one.x - place.x, one.y - place.y)));
    const next = places.reduce((a, b) => (gap(b) > gap(a) ? b : a));
    if (gap(next) < task.furtherMm) break;
    chosen.push(next);
  }
  return chosen;
}

/** A place that makes a lopsided triangle with a pair. */
function thirdPlace(
  [a, b]: readonly [Place, Place],
  places: readonly Place[],
  apart: number,
  skew: number,
): Place | undefined {
  const length = Math.hypot(a.x - b.x, a.y - b.y);
  const far = (one: PlanePoint, other: PlanePoint) => Math.hypot(one.x - other.x, one.y - other.y);
  return places
    .filter((place) => far(place, a) >= apart && far(place, b) >= apart)
    .map((place) => ({ place, off: Math.abs(far(place, a) - skew * length) }))
    .sort((one, other) => one.off - other.off)[0]?.place;
}

/** The pins at these places, or null when a slot or a neighbour leaves no room. */
function pinsAt(chosen: readonly Place[], task: PinTask): SeamPin[] | null {
  const { diameterMm, measures } = task;
  const [first] = chosen;
  // Whole half millimetres: pins of one length serve many seams.
  const depthMm = Math.max(
    task.leastDepthMm,
    Math.floor(2 * Math.min(...chosen.map((place) => place.depthMm))) / 2,
  );
  const pins = chosen.map((place, k): SeamPin => {
    const [dx, dy] = [place.x - first.x, place.y - first.y];
    const distance = Math.hypot(dx, dy);
    const error = Math.max(SIZE_ERROR_MM, SIZE_ERROR_SHARE * distance);
    return {
      x: place.x,
      y: place.y,
      diameterMm,
      fit: k === 0 ? 'round' : k === 1 ? 'slotted' : 'loose',
      reach: k === 0 ? { x: 0, y: 0 } : { x: (error * dx) / distance, y: (error * dy) / distance },
      depthsMm: [depthMm, depthMm],
    };
  });
  const ends = pins.slice(1).flatMap(({ x, y, reach }) => [
    { x: x - reach.x, y: y - reach.y },
    { x: x + reach.x, y: y + reach.y },
  ]);
  if (ends.length === 0) return pins;
  const depths = depthsAt(task, ends, socketRadius(task));
  if (depths.some((depth) => depth < depthMm - 1e-9)) return null;
  if (ends.some((end) => isTaken({ ...end, depthMm }, task, measures))) return null;
  return pins;
}

function isTaken(place: Place, task: PinTask, measures: PinMeasures): boolean {
  const [up, down] = roomsOf(place, task, measures);
  return (
    task.above.taken.some((room) => roomsMeet(room, up)) ||
    task.below.taken.some((room) => roomsMeet(room, down))
  );
}

/** What a pin needs of the piece above and of the one below. */
export function roomsOf(
  place: Place,
  task: Pick<PinTask, 'plane' | 'normal' | 'diameterMm' | 'clearanceMm'>,
  measures: PinMeasures,
): [TakenRoom, TakenRoom] {
  const at = fromPlane(task.plane, place.x, place.y);
  const reach = place.depthMm + measures.glueRoomMm;
  const radiusMm = (task.diameterMm + task.clearanceMm) / 2 + measures.wallMm / 2;
  const end = (sign: number): [number, number, number] => [
    at[0] + sign * reach * task.normal[0],
    at[1] + sign * reach * task.normal[1],
    at[2] + sign * reach * task.normal[2],
  ];
  return [
    { from: at, to: end(1), radiusMm },
    { from: at, to: end(-1), radiusMm },
  ];
}

function asPattern({ x, y, diameterMm }: SeamPin): PatternPin {
  return { x, y, kind: String(diameterMm) };
}

/** How far off a pin may be and still find a socket, mm. */
function playOf({ clearanceMm }: PinTask, pins: readonly SeamPin[]): number {
  return clearanceMm + Math.max(...pins.map(({ reach }) => Math.hypot(reach.x, reach.y))) + 1;
}
