import type { Vector3 } from '../../shared/geometry/vectors/plane.js';
import { cross, dot } from '../../shared/geometry/vectors/vector3.js';
import { nextSide } from '../../shared/geometry/mesh/edge-mates.js';

interface Wing {
  readonly side: number;
  /** Where the triangle stands round the edge, radians, counter-clockwise seen against the edge. */
  readonly angle: number;
  /** Whether its side runs with the edge, from the lower vertex to the higher. */
  readonly isForward: boolean;
}

/**
 * Pairs the triangles round one edge so that each pair bounds one wedge of material. Outward triangles
 * that run against the edge have their material on the side of growing angle, those that run with
 * it on the other, so they pair like brackets round the edge. Triangles that contradict each other
 * pair with the nearest one left; at most one stays alone.
 * @param sides the sides on the edge, of any triangles
 */
export function pairSides(
  positions: Float64Array,
  indices: Uint32Array,
  sides: readonly number[],
): [number, number][] {
  const wings = sides
    .map((side) => wingOf(positions, indices, side, sides[0]))
    .sort((a, b) => a.angle - b.angle || a.side - b.side);
  const pairs: [number, number][] = [];
  const waiting = [...wings];
  // Brackets: an opening one directly before a closing one makes a pair, round and round.
  for (let i = 0, misses = 0; waiting.length > 1 && misses < waiting.length;) {
    const at = i % waiting.length;
    const after = (at + 1) % waiting.length;
    if (!waiting[at].isForward && waiting[after].isForward) {
      pairs.push([waiting[at].side, waiting[after].side]);
      waiting.splice(Math.max(at, after), 1);
      waiting.splice(Math.min(at, after), 1);
      misses = 0;
      i = Math.max(0, at - 1);
    } else {
      misses++;
      i = at + 1;
    }
  }
  while (waiting.length > 1) {
    const closest = closestPair(waiting);
    pairs.push([waiting[closest].side, waiting[(closest + 1) % waiting.length].side]);
    const gone = [closest, (closest + 1) % waiting.length].sort((a, b) => b - a);
    for (const at of gone) waiting.splice(at, 1);
  }
  return pairs;
}

function closestPair(wings: readonly Wing[]): number {
  let best = 0;
  let least = Infinity;
  wings.forEach((wing, i) => {
    const after = wings[(i + 1) % wings.length];
    const gap = (after.angle - wing.angle + 2 * Math.PI) % (2 * Math.PI);
    if (gap >= least) return;
    least = gap;
    best = i;
  });
  return best;
}

/** Angles are measured from the triangle of the `reference` side. */
function wingOf(
  positions: Float64Array,
  indices: Uint32Array,
  side: number,
  reference: number,
): Wing {
  const [from, to] = [indices[side], indices[nextSide(side)]];
  const [low, high] = from < to ? [from, to] : [to, from];
  const axis = unit(minus(positions, high, low));
  const x = unit(across(minus(positions, apex(indices, reference), low), axis));
  const d = across(minus(positions, apex(indices, side), low), axis);
  const y = cross(axis, x);
  return { side, angle: Math.atan2(dot(d, y), dot(d, x)), isForward: from < to };
}

function apex(indices: Uint32Array, side: number): number {
  return indices[nextSide(nextSide(side))];
}

function minus(positions: Float64Array, a: number, b: number): Vector3 {
  return [0, 1, 2].map((k) => positions[3 * a + k] - positions[3 * b + k]) as unknown as Vector3;
}

function across(v: Vector3, axis: Vector3): Vector3 {
  const along = dot(v, axis);
  return [v[0] - along * axis[0], v[1] - along * axis[1], v[2] - along * axis[2]];
}

/** Of length 1; a vector without length stays. */
function unit(v: Vector3): Vector3 {
  const length = Math.hypot(...v) || 1;
  return [v[0] / length, v[1] / length, v[2] / length];
}
