import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { ABOVE, BELOW, ON, type Sides } from './plane-sides.js';
import { integers, Scratch } from './scratch.js';
import { type SectionNodes } from './section-nodes.js';

/** The cut's data as both sides need it. */
export interface CutParts {
  readonly mesh: TriangleMesh;
  readonly sides: Sides;
  readonly nodes: SectionNodes;
  /** Node triples, counter-clockwise seen from above. */
  readonly cap: Uint32Array;
  readonly capTag: number;
  readonly numbers: OwnNumbers;
}

/** Numbers of the vertices off the plane, each on its own side. */
export interface OwnNumbers {
  readonly numberOf: Int32Array;
  readonly above: number;
  readonly below: number;
}

const vertexNumbers = new Scratch(integers);

/** Numbers the vertices of both sides, in their order. The result is valid until the next call. */
export function numberOwnVertices(vertexSides: Uint8Array): OwnNumbers {
  const numberOf = vertexNumbers.take(vertexSides.length);
  let above = 0;
  let below = 0;
  for (let vertex = 0; vertex < vertexSides.length; vertex++) {
    const side = vertexSides[vertex];
    if (side === ABOVE) numberOf[vertex] = above++;
    else if (side === BELOW) numberOf[vertex] = below++;
  }
  return { numberOf, above, below };
}

/** Corners of the part of a crossing triangle on one side: at most four. */
const corners = new Int32Array(4);

/**
 * Collects one side of a cut: its own triangles in their order, then those that touch the plane,
 * the parts of crossing triangles, and the cap. Vertices keep their order; those of the section
 * follow in order of use. O(vertices + triangles).
 */
export function collectSide(parts: CutParts, side: typeof ABOVE | typeof BELOW): TriangleMesh {
  const { mesh, sides, nodes, cap, capTag } = parts;
  const { numberOf } = parts.numbers;
  const section = new SectionNumbers(
    nodes,
    side === ABOVE ? parts.numbers.above : parts.numbers.below,
  );
  const triangles = countTriangles(parts, side) + cap.length / 3;
  const indices = new Uint32Array(3 * triangles);
  const tags = new Int32Array(triangles);
  copyOwnTriangles(mesh.indices, sides.triangles, side, numberOf, indices);
  if (mesh.tags !== undefined) copyOwnTags(mesh.tags, sides.triangles, side, tags);
  let filled = 3 * sides.counts[side];
  const append = (triangle: number, crossing: number) => {
    const found = findCorners(parts, triangle, side, crossing, section);
    for (let corner = 2; corner < found; corner++) {
      if (mesh.tags !== undefined) tags[filled / 3] = mesh.tags[triangle];
      indices[filled++] = corners[0];
      indices[filled++] = corners[corner - 1];
      indices[filled++] = corners[corner];
    }
  };
  const touching = side | ON;
  for (let triangle = 0, left = sides.counts[touching]; left > 0; triangle++) {
    if (sides.triangles[triangle] !== touching) continue;
    append(triangle, -1);
    left--;
  }
  for (let k = 0; k < nodes.crossing.length; k++) append(nodes.crossing[k], k);
  tags.fill(capTag, filled / 3);
  for (let i = 0; i < cap.length; i += 3) {
    indices[filled++] = section.numberOf(cap[i]);
    indices[filled++] = section.numberOf(cap[side === BELOW ? i + 1 : i + 2]);
    indices[filled++] = section.numberOf(cap[side === BELOW ? i + 2 : i + 1]);
  }
  const positions = new Float64Array(3 * section.end);
  copyOwnPositions(mesh.positions, sides.vertices, side, positions);
  section.copyPositions(positions);
  return { positions, indices, tags };
}

/** The loop that sees every triangle, kept by itself: with more in it, it ran four times slower. */
function copyOwnTriangles(
  from: Uint32Array,
  codes: Uint8Array,
  side: number,
  numberOf: Int32Array,
  to: Uint32Array,
): void {
  let filled = 0;
  for (let triangle = 0, at = 0; triangle < codes.length; triangle++, at += 3) {
    if (codes[triangle] !== side) continue;
    to[filled] = numberOf[from[at]];
    to[filled + 1] = numberOf[from[at + 1]];
    to[filled + 2] = numberOf[from[at + 2]];
    filled += 3;
  }
}

function copyOwnTags(from: Int32Array, codes: Uint8Array, side: number, to: Int32Array): void {
  let filled = 0;
  for (let triangle = 0; triangle < codes.length; triangle++) {
    if (codes[triangle] === side) to[filled++] = from[triangle];
  }
}

function copyOwnPositions(
  from: Float64Array,
  vertexSides: Uint8Array,
  side: number,
  to: Float64Array,
): void {
  let filled = 0;
  for (let vertex = 0, i = 0; vertex < vertexSides.length; vertex++, i += 3) {
    if (vertexSides[vertex] !== side) continue;
    to[filled] = from[i];
    to[filled + 1] = from[i + 1];
    to[filled + 2] = from[i + 2];
    filled += 3;
  }
}

/** Triangles of a side without the cap: a crossing one leaves one per own vertex, see findCorners. */
function countTriangles({ mesh, sides, nodes }: CutParts, side: number): number {
  let count = sides.counts[side] + sides.counts[side | ON];
  for (let k = 0; k < nodes.crossing.length; k++) {
    const first = 3 * nodes.crossing[k];
    for (let corner = 0; corner < 3; corner++) {
      if (sides.vertices[mesh.indices[first + corner]] === side) count++;
    }
  }
  return count;
}

/**
 * Puts the numbers of a triangle's corners on one side into `corners`, in its winding, and returns
 * how many there are: one own vertex and two nodes, or two own vertices and two nodes.
 * @param crossing place in the list of crossing triangles; -1 for one that only touches the plane
 */
function findCorners(
  { mesh, sides, nodes, numbers }: CutParts,
  triangle: number,
  side: number,
  crossing: number,
  section: SectionNumbers,
): number {
  let found = 0;
  for (let corner = 0; corner < 3; corner++) {
    const vertex = mesh.indices[3 * triangle + corner];
    const vertexSide = sides.vertices[vertex];
    if (vertexSide === side) corners[found++] = numbers.numberOf[vertex];
    else if (vertexSide === ON && nodes.nodeOfVertex !== null) {
      corners[found++] = section.numberOf(nodes.nodeOfVertex[vertex]);
    }
    if (crossing < 0) continue;
    const node = nodes.edgeNodes[3 * crossing + corner];
    if (node >= 0) corners[found++] = section.numberOf(node);
  }
  return found;
}

/** Numbers the section's nodes on one side as they are first used. */
class SectionNumbers {
  /** One past the last vertex number given. */
  end: number;
  private readonly numbers: Int32Array;

  constructor(
    private readonly nodes: SectionNodes,
    first: number,
  ) {
    this.end = first;
    this.numbers = new Int32Array(nodes.count).fill(-1);
  }

  numberOf(node: number): number {
    const number = this.numbers[node];
    return number >= 0 ? number : (this.numbers[node] = this.end++);
  }

  copyPositions(to: Float64Array): void {
    const from = this.nodes.positions;
    for (let node = 0; node < this.numbers.length; node++) {
      const at = 3 * this.numbers[node];
      if (at < 0) continue;
      to[at] = from[3 * node];
      to[at + 1] = from[3 * node + 1];
      to[at + 2] = from[3 * node + 2];
    }
  }
}
