import { orient3d } from 'robust-predicates';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';

/** Thrown where exact tests meet a tie: a point in a plane, an edge through an edge. */
export class TieError extends Error {}

/** Where two triangles cross: the numbers of both ends of their common segment. */
export type Segment = readonly [from: number, to: number];

/**
 * The vertices of a mesh and the points in which it crosses itself, each made once: a point where
 * an edge passes through a triangle belongs to both triangles of the edge and to the third.
 * Decisions are made by exact predicates (robust-predicates, after Shewchuk 1997), coordinates are
 * rounded. Ties throw a TieError: whoever asked moves the vertices a little and begins again.
 */
export class SurfacePoints {
  /** Flat xyz; those of the mesh come first. */
  readonly xyz: number[];
  /** Points inside the mesh's own edges, by `edgeKey`. */
  readonly onEdges = new Map<number, number[]>();
  private readonly made = new Map<string, number>();
  private readonly vertices: number;

  constructor(private readonly mesh: TriangleMesh) {
    this.xyz = Array.from(mesh.positions);
    this.vertices = mesh.positions.length / 3;
  }

  /** The segment in which two triangles cross; null when they do not. Neighbours in an edge never do. */
  segmentOf(one: number, other: number): Segment | null {
    const { indices } = this.mesh;
    const a = [indices[3 * one], indices[3 * one + 1], indices[3 * one + 2]] as const;
    const b = [indices[3 * other], indices[3 * other + 1], indices[3 * other + 2]] as const;
    const shared = a.filter((vertex) => b.includes(vertex as never));
    if (shared.length >= 2) return null;
    const ends: number[] = [...shared];
    for (const [triangle, corners, edges] of [
      [other, b, a],
      [one, a, b],
    ] as const)
      for (let side = 0; side < 3; side++) {
        const p = edges[side];
        const q = edges[(side + 1) % 3];
        // An edge from a shared vertex meets the other triangle there and nowhere else.
        if (shared.includes(p) || shared.includes(q)) continue;
        if (this.passes(p, q, corners)) ends.push(this.edgePoint(p, q, triangle, corners));
      }
    if (ends.length < 2) return null;
    if (ends.length > 2 || ends[0] === ends[1]) throw new TieError('Crossing in no segment.');
    return [ends[0], ends[1]];
  }

  /**
   * The point in which three triangles cross each other, made once whichever two are asked first;
   * null when their segments do not meet. @param segments of the pairs AB, AC, BC
   */
  triplePoint(
    triple: readonly [number, number, number],
    segments: readonly Segment[],
  ): number | null {
    const key = `t ${[...triple].sort((a, b) => a - b).join(' ')}`;
    const known = this.made.get(key);
    if (known !== undefined) return known < 0 ? null : known;
    const at = this.solvePlanes(triple);
    const inside = segments.map((segment) => this.share(segment, at));
    const votes = inside.filter((share) => share > 0 && share < 1).length;
    if (votes !== 0 && votes !== 3 && inside.some(isClose))
      throw new TieError('Three surfaces nearly meet.');
    const number = votes === 3 ? this.push(at) : -1;
    this.made.set(key, number);
    return number < 0 ? null : number;
  }

  /** How far along a segment a point lies, 0 to 1. */
  share([from, to]: Segment, at: readonly [number, number, number]): number {
    let along = 0;
    let length = 0;
    for (let axis = 0; axis < 3; axis++) {
      const part = this.xyz[3 * to + axis] - this.xyz[3 * from + axis];
      along += part * (at[axis] - this.xyz[3 * from + axis]);
      length += part * part;
    }
    return length > 0 ? along / length : 0;
  }

  at(point: number): [number, number, number] {
    return [this.xyz[3 * point], this.xyz[3 * point + 1], this.xyz[3 * point + 2]];
  }

  /** Whether the edge passes through the inside of the triangle. */
  private passes(p: number, q: number, corners: readonly [number, number, number]): boolean {
    const [a, b, c] = corners;
    const from = this.side(a, b, c, p);
    const to = this.side(a, b, c, q);
    if (from === to) return false;
    const turn = this.side(p, q, a, b);
    return turn === this.side(p, q, b, c) && turn === this.side(p, q, c, a);
  }

  private side(a: number, b: number, c: number, d: number): number {
    const v = this.xyz;
    const [i, j, k, l] = [3 * a, 3 * b, 3 * c, 3 * d];
    const turn = orient3d(
      ...([v[i], v[i + 1], v[i + 2], v[j], v[j + 1], v[j + 2]] as const),
      ...([v[k], v[k + 1], v[k + 2], v[l], v[l + 1], v[l + 2]] as const),
    );
    if (turn === 0) throw new TieError('A vertex in the plane of a triangle.');
    return turn > 0 ? 1 : -1;
  }

  private edgePoint(
    p: number,
    q: number,
    triangle: number,
    corners: readonly [number, number, number],
  ): number {
    const [low, high] = p < q ? [p, q] : [q, p];
    const key = `e ${low} ${high} ${triangle}`;
    const known = this.made.get(key);
    if (known !== undefined) return known;
    const [n, offset] = this.planeOf(corners);
    const from = this.at(low);
    const to = this.at(high);
    const h0 = n[0] * from[0] + n[1] * from[1] + n[2] * from[2] - offset;
    const h1 = n[0] * to[0] + n[1] * to[1] + n[2] * to[2] - offset;
    const share = Math.min(1, Math.max(0, h0 / (h0 - h1 || 1)));
    const number = this.push([
      from[0] + share * (to[0] - from[0]),
      from[1] + share * (to[1] - from[1]),
      from[2] + share * (to[2] - from[2]),
    ]);
    this.made.set(key, number);
    const edge = this.edgeKey(p, q);
    const others = this.onEdges.get(edge);
    if (others) others.push(number);
    else this.onEdges.set(edge, [number]);
    return number;
  }

  /** One number for an edge of the mesh, whichever way it runs. */
  edgeKey(p: number, q: number): number {
    return p < q ? p * this.vertices + q : q * this.vertices + p;
  }

  private push(at: readonly [number, number, number]): number {
    this.xyz.push(...at);
    return this.xyz.length / 3 - 1;
  }

  private planeOf([a, b, c]: readonly [number, number, number]): [number[], number] {
    const [p, q, r] = [this.at(a), this.at(b), this.at(c)];
    const u = q.map((x, axis) => x - p[axis]);
    const v = r.map((x, axis) => x - p[axis]);
    const n = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
    return [n, n[0] * p[0] + n[1] * p[1] + n[2] * p[2]];
  }

  private solvePlanes(triple: readonly [number, number, number]): [number, number, number] {
    const { indices } = this.mesh;
    const [[n1, d1], [n2, d2], [n3, d3]] = [...triple]
      .sort((a, b) => a - b)
      .map((t) => this.planeOf([indices[3 * t], indices[3 * t + 1], indices[3 * t + 2]]));
    const cross = (a: number[], b: number[]) => [
      a[1] * b[2] - a[2] * b[1],
      a[2] * b[0] - a[0] * b[2],
      a[0] * b[1] - a[1] * b[0],
    ];
    const [c23, c31, c12] = [cross(n2, n3), cross(n3, n1), cross(n1, n2)];
    const det = n1[0] * c23[0] + n1[1] * c23[1] + n1[2] * c23[2];
    return [0, 1, 2].map((axis) => (d1 * c23[axis] + d2 * c31[axis] + d3 * c12[axis]) / det) as [
      number,
      number,
      number,
    ];
  }
}

/** Shares this near to an end of their segment may be on either side of it. */
const CLOSE = 1e-7;

function isClose(share: number): boolean {
  return Math.abs(share) < CLOSE || Math.abs(1 - share) < CLOSE;
}
