import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { dot } from '../../shared/geometry/vectors/vector3.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { SweepMaps } from './sweep-maps.js';

/** A piece by its name and its way down the tree. */
export interface AssemblyPiece {
  readonly name: string;
  /** 'a' above, 'b' below at each cut; '.n' for loose solids of one leaf. */
  readonly path: string;
  /** As made, in the assembled model. */
  readonly mesh: TriangleMesh;
}

export interface AssemblySeam {
  readonly above: string;
  readonly below: string;
  /** From below to above. */
  readonly normal: Vector3;
}

/** One straight move; what moves may be several groups held side by side. */
export interface Move {
  readonly moved: readonly string[];
  readonly onto: readonly string[];
  /** Direction of the move, unit. */
  readonly direction: Vector3;
  /** Numbers of the seams that it closes. */
  readonly seams: readonly number[];
  /** Whether nothing is in the way. */
  readonly isFree: boolean;
}

/** Columns across the object for the sweeps, and their least side, mm. */
const COLUMNS = 260;
const FINEST_MM = 0.75;
/** Directions nearer than this are one. */
const SAME_COS = 1 - 1e-9;

/**
 * The order in which pieces are joined, each step one straight move along the seams' normal. Piece
 * by piece onto one growing object where every piece finds a free way (the fewest things in hand);
 * else the tree of cuts in reverse: there each plane parts what is joined from what comes, and a
 * group that is loose in itself moves part by part. Pieces that touch nothing have no step. What
 * has no free way is told in its step.
 */
export function planAssembly(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
): Move[] {
  if (pieces.length < 2 || seams.length === 0) return [];
  const meshes = new Map(pieces.map(({ name, mesh }) => [name, mesh]));
  const sweeps = new SweepMaps(meshes, pitchFor(pieces));
  const volume = new Map(pieces.map(({ name, mesh }) => [name, signedVolume(mesh)]));
  const weigh = (names: readonly string[]) =>
    names.reduce((sum, name) => sum + volume.get(name)!, 0);
  const single = pieceByPiece(pieces, seams, sweeps, weigh);
  return single ?? reversedTree(pieces, seams, sweeps, weigh);
}

/** Onto one growing object, a piece at a time; null when a piece finds no free way. */
function pieceByPiece(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
  weigh: Weigh,
): Move[] | null {
  const units = pieces.map(({ name }) => [name]);
  // What does not hang together can never become one object.
  if (!hangsTogether(units, seams)) return null;
  const moves = putTogether(units, seams, sweeps, weigh, true);
  return moves.every(({ isFree }) => isFree) ? moves : null;
}

type Weigh = (names: readonly string[]) => number;

/**
 * Units that hang together, joined one after another: found by taking them apart, the lightest that
 * is free first. What is free among many stays free among fewer, so nothing has to be tried again;
 * only what is left must always hang together. Where nothing is free, alone or together with others, the lightest is taken all the
 * same and its move is told to be blocked.
 * @param isSingly one unit at a time only; ends at the first that is blocked
 */
function putTogether(
  units: readonly (readonly string[])[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
  weigh: Weigh,
  isSingly = false,
): Move[] {
  const left = [...units].sort((a, b) => weigh(a) - weigh(b));
  const moves: Move[] = [];
  while (left.length > 1) {
    let blocked: Move | null = null;
    let free: Move | null = null;
    for (const { taken, isWholeSide = false } of choices(left, seams)) {
      if (isSingly && taken.length > 1) break;
      const rest = left.filter((one) => !taken.includes(one));
      // Where all of one side comes at once the other side may lie there in parts.
      if (rest.length === 0 || (!isWholeSide && !hangsTogether(rest, seams))) continue;
      const unit = taken.flat();
      const standing = rest.flat();
      const away = commonWay(unit, new Set(standing), seams);
      if (away && sweeps.isFree(unit, standing, away.direction)) {
        free = asMove(unit, standing, away, true);
        break;
      }
      if (taken.length === 1) blocked ??= blockedMove(unit, standing, away, seams);
    }
    const move = (free ?? blocked)!;
    moves.push(move);
    if (isSingly && !free) break;
    const gone = left.filter(([first]) => move.moved.includes(first));
    for (const unit of gone) left.splice(left.indexOf(unit), 1);
    if (!hangsTogether(left, seams)) break;
  }
  return moves.reverse();
}

/**
 * What may be taken off next: one unit, then two at once, then everything that opens in one
 * direction: parts that hook into each other come off together.
 */
function* choices(
  left: readonly (readonly string[])[],
  seams: readonly AssemblySeam[],
): Generator<{ taken: (readonly string[])[]; isWholeSide?: boolean }> {
  for (const unit of left) yield { taken: [unit] };
  for (const [k, one] of left.entries())
    for (const other of left.slice(k + 1)) yield { taken: [one, other] };
  const unitOf = new Map(left.flatMap((unit) => unit.map((name) => [name, unit])));
  const open = seams.filter(
    ({ above, below }) =>
      unitOf.has(above) && unitOf.has(below) && unitOf.get(above) !== unitOf.get(below),
  );
  for (const { normal } of open) {
    const along = open.filter((seam) => dot(seam.normal, normal) >= SAME_COS);
    for (const side of ['above', 'below'] as const)
      yield {
        taken: [...new Set(along.map(({ [side]: name }) => unitOf.get(name)!))],
        isWholeSide: true,
      };
  }
}

/** A move that cannot be made as it is told, with the seams that it would close. */
function blockedMove(
  unit: readonly string[],
  standing: readonly string[],
  away: ReturnType<typeof commonWay>,
  seams: readonly AssemblySeam[],
): Move {
  if (away) return asMove(unit, standing, away, false);
  const closed = seams.flatMap(({ above, below }, k) =>
    (unit.includes(above) && standing.includes(below)) ||
    (unit.includes(below) && standing.includes(above))
      ? [k]
      : [],
  );
  return { moved: unit, onto: standing, direction: [0, 0, -1], seams: closed, isFree: false };
}

function hangsTogether(
  units: readonly (readonly string[])[],
  seams: readonly AssemblySeam[],
): boolean {
  const here = new Set(units.flat());
  const groups = new Groups(units);
  for (const { above, below } of seams)
    if (here.has(above) && here.has(below)) groups.join([above], [below]);
  return groups.all().length <= 1;
}

/** The one direction in which all seams between two groups open; null without seams or with several. */
function commonWay(
  moved: readonly string[],
  standing: ReadonlySet<string>,
  seams: readonly AssemblySeam[],
): { direction: Vector3; seams: number[] } | null {
  let direction: Vector3 | null = null;
  const closed: number[] = [];
  for (const [k, { above, below, normal }] of seams.entries()) {
    const isAbove = moved.includes(above) && standing.has(below);
    const isBelow = moved.includes(below) && standing.has(above);
    if (!isAbove && !isBelow) continue;
    const away: Vector3 = isAbove ? normal : [0 - normal[0], 0 - normal[1], 0 - normal[2]];
    if (direction && dot(direction, away) < SAME_COS) return null;
    direction ??= away;
    closed.push(k);
  }
  return direction ? { direction, seams: closed } : null;
}

/**
 * The cuts from the last to the first. At each, everything that hangs together across it is joined
 * group by group; a group lies wholly on one side of the cut and moves square to it.
 */
function reversedTree(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
  weigh: Weigh,
): Move[] {
  const groups = new Groups(pieces.map(({ name }) => [name]));
  const moves: Move[] = [];
  const leafOf = ({ path }: AssemblyPiece) => path.split('.')[0];
  const nodes = new Set(
    pieces.flatMap((piece) =>
      Array.from({ length: leafOf(piece).length }, (_, depth) => leafOf(piece).slice(0, depth)),
    ),
  );
  for (const node of [...nodes].sort((a, b) => b.length - a.length || a.localeCompare(b))) {
    const inside = new Set(
      pieces.filter((one) => leafOf(one).startsWith(node)).map(({ name }) => name),
    );
    const here = seams.filter(({ above, below }) => inside.has(above) && inside.has(below));
    const joined = new Groups([...new Set([...inside].map((name) => groups.of(name)))]);
    for (const { above, below } of here) joined.join([above], [below]);
    for (const whole of joined.all()) {
      const units = [...new Set(whole.map((name) => groups.of(name)))];
      moves.push(...putTogether(units, seams, sweeps, weigh));
      groups.join(whole, []);
    }
  }
  return moves;
}

function asMove(
  moved: readonly string[],
  onto: readonly string[],
  { direction: [x, y, z], seams }: { direction: Vector3; seams: number[] },
  isFree: boolean,
): Move {
  return {
    moved: [...moved].sort(),
    onto: [...onto].sort(),
    direction: [0 - x, 0 - y, 0 - z],
    seams,
    isFree,
  };
}

/** What is joined already. */
class Groups {
  private readonly groupOf: Map<string, readonly string[]>;

  constructor(units: readonly (readonly string[])[]) {
    this.groupOf = new Map(units.flatMap((unit) => unit.map((name) => [name, unit])));
  }

  of(name: string): readonly string[] {
    return this.groupOf.get(name)!;
  }

  join(a: readonly string[], b: readonly string[]): void {
    const parts = [...a, ...b].flatMap((name) => this.of(name));
    const joined = [...new Set(parts)].sort();
    for (const name of joined) this.groupOf.set(name, joined);
  }

  all(): (readonly string[])[] {
    return [...new Set(this.groupOf.values())];
  }
}

function pitchFor(pieces: readonly AssemblyPiece[]): number {
  const [low, high] = [
    [Infinity, Infinity, Infinity],
    [-Infinity, -Infinity, -Infinity],
  ];
  for (const { mesh } of pieces) {
    const { min, max } = boundingBox(mesh.positions);
    for (let axis = 0; axis < 3; axis++) {
      low[axis] = Math.min(low[axis], min[axis]);
      high[axis] = Math.max(high[axis], max[axis]);
    }
  }
  const longest = Math.max(...[0, 1, 2].map((axis) => high[axis] - low[axis]));
  return Math.max(FINEST_MM, longest / COLUMNS);
}
