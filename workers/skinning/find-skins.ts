import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { heldColumns } from '../../shared/geometry/support/column-support.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { dot } from '../../shared/geometry/vectors/vector3.js';
import { halfWidth } from '../jointing/pin-places.js';
import { type Loops, loopsOf } from '../solids/regions.js';
import { type CrossSection, type Solids, type SolidScope } from '../solids/solid-kernel.js';

/** A wall across an opening, in coordinates whose z is the build direction, mm. */
export interface Skin {
  /** Plan of the wall: flat xy loops along u and v of the build's frame. */
  readonly band: Loops;
  readonly footMm: number;
  readonly headMm: number;
  /** Along the wall. */
  readonly lengthMm: number;
  /** Of the wall that the opening is in. */
  readonly wallMm: number;
}

export interface SkinTask {
  readonly overhangDegrees: number;
  readonly bridgeMm: number;
  readonly skinMm: number;
}

/** Openings are in walls no thicker than this, mm, and so many times as long as the wall is thick. */
const THICKEST_WALL_MM = 8;
const LEAST_SLENDERNESS = 3;
/** Lower gaps are not worth a wall, mm. */
const LEAST_HEIGHT_MM = 3;
const PITCH_MM = 1;

/**
 * Openings in thin walls whose support would be a sheet: where what is held up, seen from above,
 * is a strip as narrow as a wall. For each the plan of a wall one line wide along the middle of
 * the strip, from the foot of the support to its head. Empty for support of any other shape.
 */
export function findSkins(
  solids: Solids,
  mesh: TriangleMesh,
  up: Vector3,
  { overhangDegrees, bridgeMm, skinMm }: SkinTask,
): Skin[] {
  const held = heldColumns({ mesh, up, pitchMm: PITCH_MM, overhangDegrees, bridgeMm });
  const sheets = groupColumns(held.columns);
  if (sheets.length === 0) return [];
  return solids.withSolids((scope) => {
    const heads = headsOf(mesh, up, held, overhangDegrees);
    return sheets.flatMap((sheet) => {
      const region = shadowOf(scope, heads, sheet);
      const skin = region && skinOf(scope, region, sheet, skinMm);
      return skin ? [skin] : [];
    });
  });
}

/** Columns that stand side by side. */
interface Sheet {
  readonly cells: ReadonlySet<string>;
  readonly footMm: number;
  readonly headMm: number;
}

const cellOf = (x: number, y: number) => `${Math.floor(x / PITCH_MM)} ${Math.floor(y / PITCH_MM)}`;

function groupColumns(columns: Float64Array): Sheet[] {
  const at = new Map<string, number[]>();
  for (let k = 0; k < columns.length; k += 4) {
    if (columns[k + 3] - columns[k + 2] < LEAST_HEIGHT_MM) continue;
    const cell = cellOf(columns[k], columns[k + 1]);
    const list = at.get(cell);
    if (list) list.push(k);
    else at.set(cell, [k]);
  }
  const sheets: Sheet[] = [];
  const done = new Set<string>();
  for (const start of at.keys()) {
    if (done.has(start)) continue;
    const cells = new Set<string>();
    const open = [start];
    let [footMm, headMm] = [Infinity, -Infinity];
    for (let cell = open.pop(); cell !== undefined; cell = open.pop()) {
      if (done.has(cell)) continue;
      done.add(cell);
      cells.add(cell);
      for (const k of at.get(cell)!) {
        footMm = Math.min(footMm, columns[k + 2]);
        headMm = Math.max(headMm, columns[k + 3]);
      }
      const [x, y] = cell.split(' ').map(Number);
      for (const dx of [-1, 0, 1])
        for (const dy of [-1, 0, 1]) {
          const next = `${x + dx} ${y + dy}`;
          if (at.has(next) && !done.has(next)) open.push(next);
        }
    }
    sheets.push({ cells, footMm, headMm });
  }
  return sheets;
}

/** Triangles that lean too far, seen from above: six numbers each, counter-clockwise. */
function headsOf(
  { positions: p, indices }: TriangleMesh,
  up: Vector3,
  { u, v }: { u: Vector3; v: Vector3 },
  overhangDegrees: number,
): number[][] {
  const lean = Math.sin((overhangDegrees * Math.PI) / 180);
  const heads: number[][] = [];
  for (let t = 0; t < indices.length; t += 3) {
    const corners = [0, 1, 2].map((k): Vector3 => {
      const at = 3 * indices[t + k];
      return [p[at], p[at + 1], p[at + 2]];
    });
    const [x, y, z] = [u, v, up].map((axis) => corners.map((corner) => dot(corner, axis)));
    const shadow = (x[1] - x[0]) * (y[2] - y[0]) - (x[2] - x[0]) * (y[1] - y[0]);
    if (shadow >= 0) continue;
    const [ux, uy, uz] = [x[1] - x[0], y[1] - y[0], z[1] - z[0]];
    const [vx, vy, vz] = [x[2] - x[0], y[2] - y[0], z[2] - z[0]];
    const size = Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, shadow);
    if (-shadow > lean * size) heads.push([x[0], y[0], x[2], y[2], x[1], y[1]]);
  }
  return heads;
}

/** The shadow of all that a sheet holds up. */
function shadowOf(
  scope: SolidScope,
  heads: readonly number[][],
  { cells }: Sheet,
): CrossSection | null {
  const own = heads.filter((head) => {
    const x = (head[0] + head[2] + head[4]) / 3;
    const y = (head[1] + head[3] + head[5]) / 3;
    return (
      cells.has(cellOf(x, y)) || [0, 2, 4].some((k) => cells.has(cellOf(head[k], head[k + 1])))
    );
  });
  if (own.length === 0) return null;
  const polygons = own.map(([ax, ay, bx, by, cx, cy]): [number, number][] => [
    [ax, ay],
    [bx, by],
    [cx, cy],
  ]);
  const shadow = scope.keep(new scope.CrossSection(polygons, 'NonZero'));
  // Only over the sheet itself: one head may hold up more than its opening.
  const squares = [...cells].map((cell): [number, number][] => {
    const [x, y] = cell.split(' ').map((part) => Number(part) * PITCH_MM);
    const far = PITCH_MM;
    return [
      [x - far, y - far],
      [x + 2 * far, y - far],
      [x + 2 * far, y + 2 * far],
      [x - far, y + 2 * far],
    ];
  });
  const ground = scope.keep(new scope.CrossSection(squares, 'NonZero'));
  return scope.keep(shadow.intersect(ground));
}

function skinOf(
  scope: SolidScope,
  region: CrossSection,
  { footMm, headMm }: Sheet,
  skinMm: number,
): Skin | null {
  const wallMm = 2 * halfWidth(scope, region);
  if (wallMm > THICKEST_WALL_MM || wallMm <= skinMm) return null;
  const lengthMm = region.area() / wallMm;
  if (lengthMm < LEAST_SLENDERNESS * wallMm) return null;
  const inset = scope.keep(region.offset(-(wallMm - skinMm) / 2, 'Miter', 2));
  const band = loopsOf(scope, inset);
  return band.length > 0 ? { band, footMm, headMm, lengthMm, wallMm } : null;
}
