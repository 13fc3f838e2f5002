import type { PolygonTriangulator } from '../../../shared/geometry/cutting/cut-mesh.js';
import { nextSide } from '../../../shared/geometry/mesh/edge-mates.js';
import type { Hole } from '../mending.js';
import { rimPlane, type RimPlane } from './rim-plane.js';

interface FlatRim {
  readonly hole: Hole;
  readonly plane: RimPlane;
  /** The cap's outline in the plane, against the rim: flat xy. */
  loop: Float64Array;
}

/** Two planes are one when their normals differ by less than this sine. */
const sameSine = 1e-3;

/**
 * Caps flat rims. Rims of one plane are triangulated together: those that run the other way and lie
 * inside another are holes in its cap. A group whose caps would not come out right, because rims
 * cross or a new edge doubles one that is there, is left to others.
 * @returns triangles by mesh vertices a group, and the ids of the holes that are closed by them
 */
export function capFlatRims(
  holes: readonly Hole[],
  tolerance: number,
  triangulate: PolygonTriangulator,
  isEdge: (a: number, b: number) => boolean,
): { caps: number[][]; done: Set<number> } {
  const caps: number[][] = [];
  const done = new Set<number>();
  for (const group of groupByPlane(holes, tolerance)) {
    for (const part of separateCaps(group)) {
      const triangles = capOf(part, triangulate, isEdge);
      if (!triangles) continue;
      caps.push(triangles);
      for (const { hole } of part) done.add(hole.id);
    }
  }
  return { caps, done };
}

/** Flat rims that lie in one plane and near each other: of others none can lie inside another. */
function groupByPlane(holes: readonly Hole[], tolerance: number): FlatRim[][] {
  const rims: FlatRim[] = [];
  for (const hole of holes) {
    const plane = rimPlane(hole.rim, 2 * tolerance);
    if (plane) rims.push({ hole, plane, loop: new Float64Array(0) });
  }
  const groupOf = rims.map((_, i) => i);
  const rootOf = (i: number): number => {
    while (groupOf[i] !== i) i = groupOf[i] = groupOf[groupOf[i]];
    return i;
  };
  // Sweeps along x over the spheres around the rims; those still open may reach the next one.
  const from = (i: number) => rims[i].hole.centre[0] - rims[i].hole.reach;
  const order = rims.map((_, i) => i).sort((a, b) => from(a) - from(b) || a - b);
  let open: number[] = [];
  for (const i of order) {
    const start = from(i) - tolerance;
    open = open.filter((j) => rims[j].hole.centre[0] + rims[j].hole.reach >= start);
    for (const j of open) {
      if (!areNear(rims[i].hole, rims[j].hole, tolerance)) continue;
      if (!isSamePlane(rims[j], rims[i], tolerance)) continue;
      const [a, b] = [rootOf(i), rootOf(j)];
      groupOf[Math.max(a, b)] = Math.min(a, b);
    }
    open.push(i);
  }
  const groups = new Map<number, FlatRim[]>();
  rims.forEach((rim, i) => {
    const group = groups.get(rootOf(i));
    if (group) group.push(rim);
    else groups.set(rootOf(i), [rim]);
  });
  for (const group of groups.values()) layFlat(group);
  return [...groups.values()];
}

function areNear(one: Hole, other: Hole, tolerance: number): boolean {
  const reach = one.reach + other.reach + tolerance;
  const [x, y, z] = one.centre;
  const [a, b, c] = other.centre;
  return (x - a) * (x - a) + (y - b) * (y - b) + (z - c) * (z - c) <= reach * reach;
}

/** In one plane, facing the same or the opposite way. */
function isSamePlane(one: FlatRim, other: FlatRim, tolerance: number): boolean {
  const [ax, ay, az] = one.plane.normal;
  const [bx, by, bz] = other.plane.normal;
  const sine = Math.hypot(ay * bz - az * by, az * bx - ax * bz, ax * by - ay * bx);
  if (sine > sameSine) return false;
  const [x, y, z] = other.hole.centre;
  return Math.abs(ax * x + ay * y + az * z - one.plane.offset) <= 2 * tolerance;
}

/** Outlines in the frame of the first rim's plane: counter-clockwise for caps that face like it. */
function layFlat(group: FlatRim[]): void {
  const [nx, ny, nz] = group[0].plane.normal;
  const along = Math.abs(nx) < 0.6 ? [1, 0, 0] : [0, 1, 0];
  const u = unit([
    along[1] * nz - along[2] * ny,
    along[2] * nx - along[0] * nz,
    along[0] * ny - along[1] * nx,
  ]);
  const v = [ny * u[2] - nz * u[1], nz * u[0] - nx * u[2], nx * u[1] - ny * u[0]];
  const [ox, oy, oz] = group[0].hole.centre;
  for (const rim of group) {
    const { rim: points } = rim.hole;
    const count = points.length / 3;
    rim.loop = new Float64Array(2 * count);
    for (let i = 0; i < count; i++) {
      const at = 3 * (count - 1 - i);
      const [x, y, z] = [points[at] - ox, points[at + 1] - oy, points[at + 2] - oz];
      rim.loop[2 * i] = x * u[0] + y * u[1] + z * u[2];
      rim.loop[2 * i + 1] = x * v[0] + y * v[1] + z * v[2];
    }
  }
}

function unit([x, y, z]: number[]): number[] {
  const length = Math.hypot(x, y, z);
  return [x / length, y / length, z / length];
}

/** Every outline with those right inside it that run the other way; all others stand for themselves. */
function separateCaps(group: readonly FlatRim[]): FlatRim[][] {
  if (group.length === 1) return [[...group]];
  const rims = group.map((rim) => ({ rim, area: areaOf(rim.loop) }));
  rims.sort((a, b) => Math.abs(b.area) - Math.abs(a.area) || a.rim.hole.id - b.rim.hole.id);
  const parts = new Map<FlatRim, FlatRim[]>();
  rims.forEach(({ rim, area }, i) => {
    let around = i - 1;
    while (around >= 0 && !isInside(rims[around].rim.loop, rim.loop[0], rim.loop[1])) around--;
    const part = around >= 0 ? parts.get(rims[around].rim) : undefined;
    if (part && rims[around].area * area < 0) part.push(rim);
    else parts.set(rim, [rim]);
  });
  return [...parts.values()];
}

function capOf(
  part: readonly FlatRim[],
  triangulate: PolygonTriangulator,
  isEdge: (a: number, b: number) => boolean,
): number[] | null {
  // An outline that stands alone the other way round is seen from behind.
  const isBack = areaOf(part[0].loop) < 0;
  const loops = part.map(({ loop }) => (isBack ? mirrored(loop) : loop));
  const numbers = part.flatMap(({ hole }) => [...hole.vertices].reverse());
  const places = triangulate(loops);
  const points = loops.flatMap((loop) => [...loop]);
  const wanted = loops.reduce((sum, loop) => sum + areaOf(loop), 0);
  let area = 0;
  for (let i = 0; i < places.length; i += 3) {
    const [a, b, c] = [2 * places[i], 2 * places[i + 1], 2 * places[i + 2]];
    const one =
      ((points[b] - points[a]) * (points[c + 1] - points[a + 1]) -
        (points[c] - points[a]) * (points[b + 1] - points[a + 1])) /
      2;
    area += Math.abs(one);
  }
  if (!(Math.abs(area - wanted) <= 1e-6 * wanted)) return null;
  const corners = numbers.length;
  if (places.length / 3 !== corners - 2 + 2 * (part.length - 1)) return null;
  return isFree(places, loops, numbers, isEdge)
    ? Array.from(places, (place) => numbers[place])
    : null;
}

/** Whether no edge inside the cap is there already. */
function isFree(
  places: Uint32Array,
  loops: readonly Float64Array[],
  numbers: readonly number[],
  isEdge: (a: number, b: number) => boolean,
): boolean {
  const next = new Map<number, number>();
  let first = 0;
  for (const loop of loops) {
    const count = loop.length / 2;
    for (let i = 0; i < count; i++) next.set(first + i, first + ((i + 1) % count));
    first += count;
  }
  for (let side = 0; side < places.length; side++) {
    const [a, b] = [places[side], places[nextSide(side)]];
    if (next.get(a) !== b && isEdge(numbers[a], numbers[b])) return false;
  }
  return true;
}

function mirrored(loop: Float64Array): Float64Array {
  return loop.map((value, i) => (i % 2 === 0 ? -value : value));
}

function areaOf(loop: Float64Array): number {
  let twofold = 0;
  for (let i = 0; i < loop.length; i += 2) {
    const j = (i + 2) % loop.length;
    twofold += loop[i] * loop[j + 1] - loop[j] * loop[i + 1];
  }
  return twofold / 2;
}

/** Even-odd rule. */
function isInside(loop: Float64Array, x: number, y: number): boolean {
  let inside = false;
  for (let i = 0; i < loop.length; i += 2) {
    const j = (i + 2) % loop.length;
    const isAbove = loop[i + 1] > y;
    if (isAbove === loop[j + 1] > y) continue;
    const at = loop[i] + ((y - loop[i + 1]) / (loop[j + 1] - loop[i + 1])) * (loop[j] - loop[i]);
    if (at > x) inside = !inside;
  }
  return inside;
}
