import { sectionLoops } from '../../shared/geometry/cutting/section-loops.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { fromPlane, toPlane } from '../../shared/geometry/sections/seam-plane.js';
import { type SeamRegion } from '../building/seam-areas.js';
import { type Loops, loopsOf, regionOf } from '../solids/regions.js';
import { type CrossSection, type Solids, type SolidScope } from '../solids/solid-kernel.js';
import { type PlanePoint } from './outlines.js';
import { roomsMeet, type TakenRoom } from './seam-pin.js';

/** A strip that is glued behind the wall of one piece and slides behind the other's. */
export interface Lip {
  /** Its section in the seam's coordinates; it reaches `heightMm` to either side of the seam. */
  readonly section: Loops;
  readonly heightMm: number;
  readonly thicknessMm: number;
  /** Along the wall. */
  readonly lengthMm: number;
  readonly at: PlanePoint;
}

export interface LipTask {
  readonly seam: SeamRegion;
  /** Every piece that comes near the seam, its own two among them. */
  readonly near: readonly TriangleMesh[];
  /** Middle of the object: lips stand on the side of the wall that looks to it. */
  readonly middle: readonly [number, number, number];
  readonly heightMm: number;
  readonly thicknessMm: number;
  /** Gap to the wall, mm: half the diametral clearance. */
  readonly gapMm: number;
  /** What other lips of these pieces need already; new ones are added. */
  readonly taken: TakenRoom[];
  readonly most: number;
}

/** Wanted length of a lip along the wall, and the least that is worth gluing, mm. */
const LENGTHS_MM = [40, 24, 12];
/** How much the wall may draw back from the lip over its height, mm: glue fills no more. */
const MOST_LEAN_MM = 1.5;
/** Share of the plain strip that must be left of it: a lip is no crumb. */
const LEAST_WHOLE = 0.85;
/** Lips are no nearer to one another along the wall than this, mm. */
const APART_MM = 30;
/** Places along the wall, mm. */
const STEP_MM = 4;

/**
 * Lips behind a thin wall: strips that follow the inner outline of the seam, clear of both pieces
 * over their whole height, spread along the wall. None where the wall leans so much that a straight
 * strip would stand off it, or where it is too short.
 */
export function makeLips(scope: SolidScope, region: CrossSection, task: LipTask): Lip[] {
  const { seam, heightMm, thicknessMm, gapMm } = task;
  const walls = wallsOver(scope, region, task);
  const blocked = scope.keep(walls.offset(gapMm, 'Round', 2, 32));
  const reach = scope.keep(walls.offset(gapMm + thicknessMm, 'Round', 2, 32));
  const band = scope.keep(reach.subtract(blocked));
  const near = scope.keep(region.offset(gapMm + thicknessMm + MOST_LEAN_MM, 'Round', 2, 32));
  const strip = scope.keep(band.intersect(near));
  const lips: Lip[] = [];
  const stations = inwardStations(region, task);
  for (const lengthMm of LENGTHS_MM) {
    for (const station of spread(stations)) {
      if (lips.length >= task.most) break;
      if (lips.some(({ at }) => distance(at, station) < lengthMm + APART_MM)) continue;
      const cut = scope.keep(strip.intersect(windowAt(scope, station, lengthMm, task)));
      const whole = pieceNear(scope, cut, station);
      if (!whole || whole.area() < LEAST_WHOLE * lengthMm * thicknessMm) continue;
      const room = roomOf(station, lengthMm, task);
      if (task.taken.some((other) => roomsMeet(other, room))) continue;
      const section = loopsOf(scope, whole);
      if (section.length !== 1) continue;
      task.taken.push(room);
      lips.push({ section, heightMm, thicknessMm, lengthMm, at: { x: station.x, y: station.y } });
    }
    if (lips.length >= 2 || (lips.length === 1 && seam.areaMm2 < 300)) break;
  }
  return lips;
}

/** The lip as it is printed: standing on z = 0, the seam's normal up. */
export function lipMesh(solids: Solids, { section, heightMm }: Lip): TriangleMesh {
  const mesh = extruded(solids, section, 0, 2 * heightMm);
  let [left, low] = [Infinity, Infinity];
  for (let k = 0; k < mesh.positions.length; k += 3) {
    left = Math.min(left, mesh.positions[k]);
    low = Math.min(low, mesh.positions[k + 1]);
  }
  const positions = mesh.positions.map((value, k) =>
    k % 3 === 0 ? value - left : k % 3 === 1 ? value - low : value,
  );
  return { positions, indices: mesh.indices };
}

/** The lip where it goes in the assembled model. */
export function lipInPlace(
  solids: Solids,
  { section, heightMm }: Lip,
  seam: SeamRegion,
): TriangleMesh {
  const mesh = extruded(solids, section, -heightMm, heightMm);
  const positions = new Float64Array(mesh.positions.length);
  for (let k = 0; k < positions.length; k += 3) {
    const at = fromPlane(seam.plane, mesh.positions[k], mesh.positions[k + 1]);
    for (let axis = 0; axis < 3; axis++)
      positions[k + axis] = at[axis] + mesh.positions[k + 2] * seam.normal[axis];
  }
  return { positions, indices: mesh.indices };
}

function extruded(solids: Solids, section: Loops, from: number, to: number): TriangleMesh {
  const face = solids.triangulate(section);
  const count = section.reduce((sum, loop) => sum + loop.length / 2, 0);
  const positions = new Float64Array(6 * count);
  const indices: number[] = [];
  let at = 0;
  for (const loop of section) {
    const n = loop.length / 2;
    for (let k = 0; k < n; k++) {
      positions.set([loop[2 * k], loop[2 * k + 1], from], 3 * (at + k));
      positions.set([loop[2 * k], loop[2 * k + 1], to], 3 * (count + at + k));
      const [a, b] = [at + k, at + ((k + 1) % n)];
      indices.push(a, b, b + count, a, b + count, a + count);
    }
    at += n;
  }
  for (let k = 0; k < face.length; k += 3) {
    indices.push(face[k], face[k + 2], face[k + 1]);
    indices.push(face[k] + count, face[k + 1] + count, face[k + 2] + count);
  }
  return { positions, indices: Uint32Array.from(indices) };
}

/** Everything solid of the pieces over the height of a lip, seen along the seam's normal. */
function wallsOver(
  scope: SolidScope,
  region: CrossSection,
  { seam, near, heightMm }: LipTask,
): CrossSection {
  let walls = region;
  for (const share of [-1, -0.5, -0.02, 0.02, 0.5, 1])
    for (const mesh of near) {
      const loops = sectionLoops(mesh, seam.plane, seam.normal, share * heightMm);
      if (loops.length > 0) walls = scope.keep(walls.add(regionOf(scope, loops)));
    }
  return walls;
}

/** A point on the outline with the direction out of the wall. */
interface Station extends PlanePoint {
  readonly outX: number;
  readonly outY: number;
  /** How much that side looks to the middle of the object. */
  readonly inward: number;
}

/** Points along the outline whose outside looks to the object's middle. */
function inwardStations(region: CrossSection, { seam, middle }: LipTask): Station[] {
  const [mx, my] = toPlane(seam.plane, middle, 0);
  const stations: Station[] = [];
  for (const polygon of region.toPolygons()) {
    let left = STEP_MM / 2;
    for (const [k, [ax, ay]] of polygon.entries()) {
      const [bx, by] = polygon[(k + 1) % polygon.length];
      const side = Math.hypot(bx - ax, by - ay);
      if (side === 0) continue;
      // Outers turn counter-clockwise and holes clockwise: the outside is on the right of both.
      const [outX, outY] = [(by - ay) / side, (ax - bx) / side];
      for (; left < side; left += STEP_MM) {
        const [x, y] = [ax + ((bx - ax) * left) / side, ay + ((by - ay) * left) / side];
        const inward =
          ((mx - x) * outX + (my - y) * outY) / Math.max(1e-9, Math.hypot(mx - x, my - y));
        if (inward > 0.15) stations.push({ x, y, outX, outY, inward });
      }
      left -= side;
    }
  }
  return stations;
}

/** The same stations in an order that spreads them: first the first, then the farthest of all. */
function spread(stations: readonly Station[]): Station[] {
  if (stations.length === 0) return [];
  const gap = stations.map(() => Infinity);
  const order: Station[] = [];
  // The middle of the row first: the ends are where the wall may be short.
  let next = Math.floor(stations.length / 2);
  while (order.length < Math.min(stations.length, 60)) {
    order.push(stations[next]);
    for (const [k, station] of stations.entries())
      gap[k] = Math.min(gap[k], distance(station, stations[next]));
    next = gap.reduce((best, value, k) => (value > gap[best] ? k : best), 0);
  }
  return order;
}

/** The rectangle behind the wall in which a lip may lie. */
function windowAt(
  scope: SolidScope,
  { x, y, outX, outY }: Station,
  lengthMm: number,
  { thicknessMm, gapMm }: LipTask,
): CrossSection {
  const deep = thicknessMm + gapMm + MOST_LEAN_MM + sagitta(lengthMm);
  const half = lengthMm / 2;
  const corner = (along: number, out: number): [number, number] => [
    x - along * outY + out * outX,
    y + along * outX + out * outY,
  ];
  const back = -sagitta(lengthMm);
  return scope.keep(
    new scope.CrossSection(
      [[corner(-half, back), corner(-half, deep), corner(half, deep), corner(half, back)]],
      'NonZero',
    ),
  );
}

/** How far a curved wall may leave its tangent over a lip's length, mm: that of a radius of 60 mm. */
function sagitta(lengthMm: number): number {
  return 60 - Math.sqrt(60 ** 2 - (lengthMm / 2) ** 2);
}

/** The part of a region that lies at a station; undefined when there is none. */
function pieceNear(
  scope: SolidScope,
  cut: CrossSection,
  { x, y, outX, outY }: Station,
): CrossSection | undefined {
  const parts = cut.decompose().map((part) => scope.keep(part));
  const reach = scope.keep(
    scope.keep(scope.CrossSection.circle(3, 16)).translate([x + 1.5 * outX, y + 1.5 * outY]),
  );
  return parts
    .map((part) => ({ part, shared: scope.keep(part.intersect(reach)).area() }))
    .filter(({ shared }) => shared > 0)
    .sort((a, b) => b.shared - a.shared)[0]?.part;
}

function roomOf(
  { x, y, outX, outY }: Station,
  lengthMm: number,
  { seam, heightMm, thicknessMm }: LipTask,
): TakenRoom {
  const half = lengthMm / 2;
  return {
    from: [...fromPlane(seam.plane, x - half * outY, y + half * outX)],
    to: [...fromPlane(seam.plane, x + half * outY, y - half * outX)],
    radiusMm: Math.hypot(heightMm, thicknessMm) + 1,
  };
}

function distance(a: PlanePoint, b: PlanePoint): number {
  return Math.hypot(a.x - b.x, a.y - b.y);
}
