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

/** One straight move. */
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
/** Pieces that the building up piece by piece is begun with. */
const STARTS = 6;

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
  const single = pieceByPiece(pieces, seams, sweeps);
  return single ?? reversedTree(pieces, seams, sweeps);
}

/** Onto one growing object, a piece at a time; null when no start gets all pieces on. */
function pieceByPiece(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
): Move[] | null {
  // What does not hang together can never become one object.
  const reach = new Groups(pieces.map(({ name }) => name));
  for (const { above, below } of seams) reach.join([above], [below]);
  if (reach.all().length > 1) return null;
  const area = new Map<string, number>();
  for (const { above, below } of seams)
    for (const name of [above, below]) area.set(name, (area.get(name) ?? 0) + 1);
  const starts = [...pieces].sort(
    (a, b) => (area.get(b.name) ?? 0) - (area.get(a.name) ?? 0) || a.name.localeCompare(b.name),
  );
  for (const { name } of starts.slice(0, STARTS)) {
    const moves = grownFrom(name, pieces, seams, sweeps);
    if (moves) return moves;
  }
  return null;
}

function grownFrom(
  start: string,
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
): Move[] | null {
  const standing = new Set([start]);
  const moves: Move[] = [];
  while (standing.size < pieces.length) {
    const move = nextPiece(pieces, seams, sweeps, standing);
    if (!move) return null;
    moves.push(move);
    standing.add(move.moved[0]);
  }
  return moves;
}

function nextPiece(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
  standing: ReadonlySet<string>,
): Move | null {
  for (const { name } of pieces) {
    if (standing.has(name)) continue;
    const away = commonWay([name], standing, seams);
    if (!away || !sweeps.isFree([name], standing, away.direction)) continue;
    return asMove([name], [...standing], away, true);
  }
  return null;
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

/** The cuts from the last to the first; at each, what is above comes to what is below. */
function reversedTree(
  pieces: readonly AssemblyPiece[],
  seams: readonly AssemblySeam[],
  sweeps: SweepMaps,
): Move[] {
  const volume = new Map(pieces.map(({ name, mesh }) => [name, signedVolume(mesh)]));
  const weigh = (names: readonly string[]) =>
    names.reduce((sum, name) => sum + volume.get(name)!, 0);
  const groups = new Groups(pieces.map(({ name }) => name));
  const moves: Move[] = [];
  const leafOf = ({ path }: AssemblyPiece) => path.split('.')[0];
  const nodes = new Set(
    pieces.flatMap((piece) =>
      Array.from({ length: leafOf(piece).length }, (_, depth) => leafOf(piece).slice(0, depth)),
    ),
  );
  for (const node of [...nodes].sort((a, b) => b.length - a.length || a.localeCompare(b))) {
    const side = (way: string) =>
      new Set(pieces.filter((one) => leafOf(one).startsWith(node + way)).map(({ name }) => name));
    const [above, below] = [side('a'), side('b')];
    // Each move may open the way for the next: try until nothing more is free.
    for (;;) {
      const waiting = openJoins(groups, seams, above, below);
      if (waiting.length === 0) break;
      const moves_ = waiting.map(([a, b]) => joinOf(a, b, seams, weigh, sweeps));
      const move = moves_.find(({ isFree }) => isFree) ?? moves_[0];
      moves.push(move);
      groups.join(move.moved, move.onto);
    }
  }
  return moves;
}

/** Pairs of groups with a seam between the two sides of a cut. */
function openJoins(
  groups: Groups,
  seams: readonly AssemblySeam[],
  above: ReadonlySet<string>,
  below: ReadonlySet<string>,
): [readonly string[], readonly string[]][] {
  const pairs = new Map<string, [readonly string[], readonly string[]]>();
  for (const seam of seams) {
    if (!above.has(seam.above) || !below.has(seam.below)) continue;
    const [a, b] = [groups.of(seam.above), groups.of(seam.below)];
    if (a !== b) pairs.set(`${a[0]} ${b[0]}`, [a, b]);
  }
  return [...pairs.values()];
}

/** The lighter of two groups comes to the heavier; the other way round when only that is free. */
function joinOf(
  a: readonly string[],
  b: readonly string[],
  seams: readonly AssemblySeam[],
  weigh: (names: readonly string[]) => number,
  sweeps: SweepMaps,
): Move {
  const [moved, onto] = weigh(a) <= weigh(b) ? [a, b] : [b, a];
  const away = commonWay(moved, new Set(onto), seams);
  if (!away) return { moved, onto, direction: [0, 0, -1], seams: [], isFree: false };
  // Two groups alone: drawing one away is as free as drawing the other the other way.
  return asMove(moved, onto, away, sweeps.isFree(moved, onto, away.direction));
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

  constructor(names: readonly string[]) {
    this.groupOf = new Map(names.map((name) => [name, [name]]));
  }

  of(name: string): readonly string[] {
    return this.groupOf.get(name)!;
  }

  join(a: readonly string[], b: readonly string[]): void {
    const joined = [
      ...new Set([...a.flatMap((name) => this.of(name)), ...b.flatMap((name) => this.of(name))]),
    ].sort();
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
