import { AsciiCursor } from './ascii-cursor.js';
import { largestCoordinate } from './coordinate-limits.js';
import { growingFloats, growingIndices } from './growing-list.js';
import { weldIndexed } from './indexed-mesh.js';
import type { MeshReading } from './mesh-reading.js';
import { countOf, refuseFile, spelledCount } from './refusal-words.js';
import { triangulatePolygon } from './triangulate-polygon.js';

/** Statements of the Wavefront OBJ text format (appendix B1 of its maker's manual, as reprinted widely). */
const statements = new Set(
  'v vt vn vp f l p o g s mg usemtl mtllib usemap maplib curv curv2 surf cstype deg bmat step parm trim hole scrv sp end con bevel c_interp d_interp lod shadow_obj trace_obj ctech stech call csh'.split(
    ' ',
  ),
);
/** Statements of shapes that are not made of facets. */
const curved = new Set(['l', 'p', 'curv', 'curv2', 'surf']);
/** A polygon with more corners is damage. */
const mostCorners = 10_000;
const reportEvery = 1 << 16;
const sniffedBytes = 2048;

/** Whether the first words of a text are those of an OBJ file. */
export function looksLikeObj(bytes: Uint8Array): boolean {
  const head = bytes.subarray(0, sniffedBytes);
  if (head.includes(0)) return false;
  const cursor = new AsciiCursor(head, startOf(bytes));
  while (cursor.next()) {
    const word = cursor.word(12);
    if (word.startsWith('#')) {
      cursor.skipLine();
      continue;
    }
    // Longer words first: "solid" and "facet" begin an STL.
    return statements.has(word);
  }
  return false;
}

interface Part {
  readonly name: string;
  /** First triangle. */
  readonly from: number;
  readonly isObject: boolean;
}

/**
 * Reads an OBJ file: vertices and polygonal faces; normals, texture coordinates and materials are
 * passed over. Objects are its parts, or groups when it has no objects. Coordinates are doubles.
 * Throws a JobRefusal with the line of what cannot be read. Beside the file it needs about 100 bytes a
 * triangle.
 */
export function readObj(
  bytes: Uint8Array,
  fileName: string,
  parts: readonly number[] | null,
  onProgress: (fraction: number) => void,
): MeshReading {
  const start = performance.now();
  const read = new ObjReader(bytes, fileName).read(onProgress);
  const parsed = performance.now();
  const listed = listParts(read.parts, read.indices.length / 3, parts);
  const indices = parts === null ? read.indices : pickTriangles(read.indices, listed);
  const welded = weldIndexed(read.positions, indices);
  const notes: string[] = [];
  if (read.curves > 0)
    notes.push(
      `The file also holds ${countOf(read.curves, 'line, point or curve', 'lines, points or curves')}. They have no surface and were passed over.`,
    );
  return {
    ...welded,
    format: 'obj',
    facetsRead: indices.length / 3,
    fileUnit: null,
    parts:
      listed.length > 1
        ? listed.map(({ name, facets, isTaken }) => ({ name, facets, isTaken }))
        : [],
    notes,
    timingsMs: { parse: parsed - start, weld: performance.now() - parsed },
  };
}

/** Byte order mark aside. */
function startOf(bytes: Uint8Array): number {
  return bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
}

class ObjReader {
  private readonly cursor: AsciiCursor;
  private readonly positions = growingFloats();
  private readonly indices = growingIndices();
  private readonly parts: Part[] = [];
  private readonly corners: number[] = [];
  private readonly named = { object: '', group: '' };
  /** Polygons that came before their vertices. */
  private readonly early: { readonly at: number; readonly corners: readonly number[] }[] = [];
  private curves = 0;
  /** The largest vertex named so far, from 0, and the byte at which it was. */
  private farthest = { vertex: -1, at: 0 };

  constructor(
    bytes: Uint8Array,
    private readonly fileName: string,
  ) {
    this.cursor = new AsciiCursor(bytes, startOf(bytes));
  }

  read(onProgress: (fraction: number) => void) {
    const { cursor, positions, indices } = this;
    const { length } = cursor.bytes;
    for (let lines = 1; cursor.next(); lines++) {
      this.statement();
      if ((lines & (reportEvery - 1)) === 0) onProgress(cursor.end / length);
    }
    if (indices.length === 0)
      throw refuseFile(
        this.fileName,
        positions.length === 0
          ? 'is an OBJ file without a single face.'
          : `is an OBJ file with ${countOf(positions.length / 3, 'vertex', 'vertices')} but without a single face.`,
      );
    const vertices = positions.length / 3;
    if (this.farthest.vertex >= vertices) {
      cursor.start = this.farthest.at;
      throw this.refuse(
        `names vertex ${spelledCount(this.farthest.vertex + 1)}, but holds only ${spelledCount(vertices)}`,
      );
    }
    this.cutEarlyPolygons();
    onProgress(1);
    return {
      positions: positions.view().slice(),
      indices: indices.view(),
      parts: this.parts,
      curves: this.curves,
    };
  }

  private cutEarlyPolygons(): void {
    const indices = this.indices.view();
    for (const { at, corners } of this.early) {
      let to = at;
      triangulatePolygon(this.positions.view(), corners, (a, b, c) => {
        indices.set([a, b, c], to);
        to += 3;
      });
    }
  }

  /** One statement, to the end of its line. */
  private statement(): void {
    const { cursor } = this;
    const first = cursor.bytes[cursor.start];
    const length = cursor.end - cursor.start;
    if (first === 118 && length === 1) return this.vertex();
    if (first === 102 && length === 1) return this.face();
    if (first === 35) return cursor.skipLine();
    const word = cursor.word(16);
    if ((word === 'o' || word === 'g') && length === 1) return this.beginPart(word === 'o');
    if (curved.has(word)) this.curves++;
    else if (!statements.has(word))
      throw this.refuse(`has “${cursor.word(24)}” where a statement should stand`);
    this.skipStatement();
  }

  private vertex(): void {
    for (let axis = 0; axis < 3; axis++) {
      if (!this.nextInLine()) throw this.refuse('has a vertex with fewer than three numbers');
      const value = this.cursor.number();
      if (value === undefined)
        throw this.refuse(`has “${this.cursor.word(24)}” where a number should stand`);
      if (!Number.isFinite(value))
        throw this.refuse('holds a coordinate that is not a number or infinite');
      if (Math.abs(value) > largestCoordinate)
        throw this.refuse('holds a coordinate beyond ±10 000 000');
      this.positions.push(value);
    }
    this.skipStatement();
  }

  private face(): void {
    const { corners, cursor } = this;
    corners.length = 0;
    while (this.nextInLine()) {
      const first = cursor.bytes[cursor.start];
      if (first === 35) {
        cursor.skipLine();
        break;
      }
      corners.push(this.cornerVertex());
      if (corners.length > mostCorners)
        throw this.refuse(`has a face of more than ${spelledCount(mostCorners)} corners`);
    }
    // A vertex given twice in a row adds nothing.
    const different = corners.filter((corner, i) => corner !== corners[(i + 1) % corners.length]);
    if (corners.length < 3) throw this.refuse(`has a face of ${countOf(corners.length, 'corner')}`);
    if (different.length < 3) return;
    const known = this.positions.length / 3;
    const push = (a: number, b: number, c: number) => {
      this.indices.push(a);
      this.indices.push(b);
      this.indices.push(c);
    };
    if (different.some((corner) => corner >= known)) {
      // Where its vertices lie is not known yet: room is made now, the cuts are chosen at the end.
      if (different.length > 3) this.early.push({ at: this.indices.length, corners: different });
      for (let i = 2; i < different.length; i++) push(different[0], different[i - 1], different[i]);
      return;
    }
    triangulatePolygon(this.positions.view(), different, push);
  }

  /** The vertex of `7`, `7/1`, `7//3`, `7/1/3` or, counted from the last one, `-1`; from 0. */
  private cornerVertex(): number {
    const { bytes, start, end } = this.cursor;
    let i = start;
    const isBack = bytes[i] === 45;
    if (isBack) i++;
    let number = 0;
    const digits = i;
    for (; i < end && bytes[i] !== 47; i++) {
      const digit = bytes[i] - 48;
      if (digit < 0 || digit > 9 || i - digits > 9)
        throw this.refuse(`has “${this.cursor.word(24)}” where a vertex number should stand`);
      number = 10 * number + digit;
    }
    const known = this.positions.length / 3;
    const vertex = isBack ? known - number : number - 1;
    if (i === digits || number === 0 || vertex < 0)
      throw this.refuse(`names the vertex “${this.cursor.word(24)}”, which there is not`);
    if (vertex > this.farthest.vertex) this.farthest = { vertex, at: start };
    return vertex;
  }

  private beginPart(isObject: boolean): void {
    const words: string[] = [];
    while (this.nextInLine()) words.push(this.cursor.word(60));
    const name = words.join(' ').slice(0, 60);
    this.parts.push({ name, from: this.indices.length / 3, isObject });
  }

  /** Moves to the next word of the same statement; a backslash at a line's end carries on. */
  private nextInLine(): boolean {
    const { cursor } = this;
    const { bytes } = cursor;
    let i = cursor.end;
    for (;;) {
      while (i < bytes.length && bytes[i] <= 32 && bytes[i] !== 10 && bytes[i] !== 13) i++;
      if (bytes[i] !== 92) break;
      let after = i + 1;
      while (bytes[after] === 32 || bytes[after] === 9) after++;
      if (bytes[after] === 13) after++;
      if (bytes[after] === 10) after++;
      if (after === i + 1 || (bytes[after - 1] !== 10 && bytes[after - 1] !== 13)) break;
      i = after;
    }
    if (i >= bytes.length || bytes[i] === 10 || bytes[i] === 13) {
      cursor.end = i;
      return false;
    }
    cursor.end = i;
    return cursor.next();
  }

  private skipStatement(): void {
    while (this.nextInLine())
      if (this.cursor.bytes[this.cursor.start] === 35) return this.cursor.skipLine();
  }

  private refuse(what: string) {
    const { cursor } = this;
    const isCut = cursor.end === cursor.bytes.length;
    return refuseFile(
      this.fileName,
      `${what} (line ${cursor.line()}). ${isCut ? 'It was cut off while being saved or sent, or is damaged.' : 'It is damaged or not an OBJ file.'}`,
    );
  }
}

interface ListedPart {
  readonly name: string;
  /** Triangles from and up to, in pairs: a part may be carried on later in the file. */
  readonly ranges: readonly (readonly [number, number])[];
  readonly facets: number;
  readonly isTaken: boolean;
}

/** Objects when the file has any, else groups; parts without a face are left out, equal names joined. */
function listParts(
  parts: readonly Part[],
  triangles: number,
  taken: readonly number[] | null,
): ListedPart[] {
  const hasObjects = parts.some((part) => part.isObject);
  const starts = parts.filter((part) => part.isObject === hasObjects);
  if (starts.length === 0 || starts[0].from > 0)
    starts.unshift({ name: '', from: 0, isObject: hasObjects });
  const byName = new Map<string, [number, number][]>();
  starts.forEach((part, i) => {
    const to = starts[i + 1]?.from ?? triangles;
    if (to === part.from) return;
    const ranges = byName.get(part.name) ?? [];
    ranges.push([part.from, to]);
    byName.set(part.name, ranges);
  });
  return [...byName].map(([name, ranges], number) => ({
    name: name || `Part ${number + 1}`,
    ranges,
    facets: ranges.reduce((sum, [from, to]) => sum + to - from, 0),
    isTaken: taken === null || taken.includes(number),
  }));
}

function pickTriangles(indices: Uint32Array, parts: readonly ListedPart[]): Uint32Array {
  const taken = parts.filter((part) => part.isTaken);
  const picked = new Uint32Array(3 * taken.reduce((sum, part) => sum + part.facets, 0));
  let filled = 0;
  for (const { ranges } of taken)
    for (const [from, to] of ranges) {
      picked.set(indices.subarray(3 * from, 3 * to), filled);
      filled += 3 * (to - from);
    }
  return picked;
}
