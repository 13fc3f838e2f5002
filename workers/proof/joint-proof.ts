import { type WrittenSolid } from './written-solid.js';

type Point = readonly [number, number, number];

/** A pin as a plan claims it to sit in one piece, in the assembled model, mm. */
export interface ClaimedPin {
  readonly piece: string;
  /** Its middle on the seam. */
  readonly at: Point;
  /** Unit direction into the piece. */
  readonly into: Point;
  readonly radiusMm: number;
  readonly depthMm: number;
  /** Half its diametral clearance in this piece: the gap that is wanted all round. */
  readonly gapMm: number;
}

/** What was measured on the written files. */
export interface JointFindings {
  readonly sockets: number;
  /** Least gap between a pin and its socket over what was wanted, mm; negative: too tight. */
  readonly leastSpareMm: number;
  readonly tightest: string;
  /** Least material round and under a socket, mm. */
  readonly leastWallMm: number;
  readonly thinnest: string;
  /** Names of pieces in which a pin would meet material. */
  readonly blocked: readonly string[];
}

const ANGLES = 24;
/** Shares of a pin's depth at which is measured; a lead-in is above the first. */
const DEPTHS = [0.35, 0.6, 0.9];

/**
 * Measures sockets on written files by rays: from points on the pin's axis outward the socket's
 * wall must come no nearer than the pin and its gap, and behind it the material must go on; at the
 * socket's floor likewise. Nothing of the code that made the sockets is used.
 */
export function measureJoints(
  pieces: ReadonlyMap<string, WrittenSolid>,
  pins: readonly ClaimedPin[],
): JointFindings {
  let leastSpareMm = Infinity;
  let tightest = '';
  let leastWallMm = Infinity;
  let thinnest = '';
  const blocked = new Set<string>();
  for (const pin of pins) {
    const solid = pieces.get(pin.piece);
    if (!solid) continue;
    const { u, v } = crossAxes(pin.into);
    for (const share of DEPTHS) {
      const point = along(pin.at, pin.into, share * pin.depthMm);
      if (solid.holds(point, u)) blocked.add(pin.piece);
      for (let k = 0; k < ANGLES; k++) {
        const angle = (2 * Math.PI * (k + 0.37)) / ANGLES;
        const [c, s] = [Math.cos(angle), Math.sin(angle)];
        const way: Point = [c * u[0] + s * v[0], c * u[1] + s * v[1], c * u[2] + s * v[2]];
        const { gapMm, wallMm } = solid.wallAlong(point, way);
        const spare = gapMm - pin.radiusMm - pin.gapMm;
        if (spare < leastSpareMm) [leastSpareMm, tightest] = [spare, pin.piece];
        if (wallMm < leastWallMm) [leastWallMm, thinnest] = [wallMm, pin.piece];
      }
    }
    const floor = solid.wallAlong(along(pin.at, pin.into, 0.5 * pin.depthMm), pin.into);
    const spare = floor.gapMm - 0.5 * pin.depthMm;
    if (spare < leastSpareMm) [leastSpareMm, tightest] = [spare, pin.piece];
    if (floor.wallMm < leastWallMm) [leastWallMm, thinnest] = [floor.wallMm, pin.piece];
  }
  return {
    sockets: pins.length,
    leastSpareMm,
    tightest,
    leastWallMm,
    thinnest,
    blocked: [...blocked].sort(),
  };
}

/** One straight move as a plan claims it. */
export interface ClaimedMove {
  readonly moved: readonly string[];
  readonly onto: readonly string[];
  /** Unit direction of the move. */
  readonly direction: Point;
}

export interface MoveFindings {
  readonly moves: number;
  readonly rays: number;
  /** Moves, from 1, in which something is in the way, with its names. */
  readonly blocked: readonly { readonly step: number; readonly by: string; readonly of: string }[];
}

/** Points looked at on each piece. */
const SAMPLES = 160;
/** Faces that are to touch may meet rays this soon, mm. */
const TOUCH_MM = 0.05;

/**
 * Draws every move of an assembly backwards on the written files: from points of what moves, rays
 * away from what stands must not meet it, and from points of what stands rays along the move must
 * not meet what moves. Sampled, so it can miss what is thinner than the samples are apart.
 */
export function measureMoves(
  pieces: ReadonlyMap<string, WrittenSolid>,
  moves: readonly ClaimedMove[],
): MoveFindings {
  const samples = new Map([...pieces].map(([name, solid]) => [name, solid.samples(SAMPLES)]));
  const blocked: { step: number; by: string; of: string }[] = [];
  let rays = 0;
  for (const [k, { moved, onto, direction }] of moves.entries()) {
    const away: Point = [0 - direction[0], 0 - direction[1], 0 - direction[2]];
    const find = () => {
      for (const [from, to, way] of [
        [moved, onto, away],
        [onto, moved, direction],
      ] as const)
        for (const name of from)
          for (const point of samples.get(name) ?? [])
            for (const other of to) {
              rays++;
              const start = along(point, way, TOUCH_MM);
              const solid = pieces.get(other);
              if (solid && solid.firstHit(start, way) < Infinity) return { by: other, of: name };
            }
      return null;
    };
    const found = find();
    if (found) blocked.push({ step: k + 1, ...found });
  }
  return { moves: moves.length, rays, blocked };
}

function along(at: Point, way: Point, by: number): Point {
  return [at[0] + by * way[0], at[1] + by * way[1], at[2] + by * way[2]];
}

/** Two unit directions across an axis. */
function crossAxes([x, y, z]: Point): { u: Point; v: Point } {
  const other: Point = Math.abs(x) < 0.6 ? [1, 0, 0] : [0, 1, 0];
  const cross: Point = [
    y * other[2] - z * other[1],
    z * other[0] - x * other[2],
    x * other[1] - y * other[0],
  ];
  const length = Math.hypot(...cross);
  const u: Point = [cross[0] / length, cross[1] / length, cross[2] / length];
  const v: Point = [y * u[2] - z * u[1], z * u[0] - x * u[2], x * u[1] - y * u[0]];
  return { u, v };
}
