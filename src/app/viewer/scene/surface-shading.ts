import { drawableEdges } from './edge-chains';

/** A surface ready to be drawn: corners split where the surface has an edge. */
export interface ShadedSurface {
  /** Flat xyz, three corners a triangle, not shared. */
  readonly positions: Float32Array;
  /** Unit normals, one a corner: smooth over gentle bends, hard at edges. */
  readonly normals: Float32Array;
  /** Segments along the edges, flat xyz, two points a segment. */
  readonly featureEdges: Float32Array;
}

/** Bends sharper than this are edges. Common practice, no source. */
const CREASE_DEGREES = 32;

/**
 * Splits a surface at its edges and gives it normals and edge lines.
 *
 * Vertices at the same place count as one, whether the file shares them or not. Triangles without
 * area get a normal of zero length and make no edges.
 * @param positions flat xyz
 * @param indices three a triangle, counter-clockwise seen from outside
 */
export function shadeSurface(positions: Float32Array, indices: Uint32Array): ShadedSurface {
  const corners = weldCorners(positions, indices);
  const { faces, areas } = faceNormals(positions, indices);
  const partners = edgePartners(corners);
  const crease = Math.cos((CREASE_DEGREES * Math.PI) / 180);
  return {
    positions: expand(positions, indices),
    normals: cornerNormals(corners, faces, areas, partners, crease),
    featureEdges: creaseLines(positions, indices, corners, faces, partners, crease),
  };
}

/** For every corner the number of its place; corners at the same coordinates share it. */
function weldCorners(positions: Float32Array, indices: Uint32Array): Uint32Array {
  const vertexCount = positions.length / 3;
  const bits = new Uint32Array(positions.buffer, positions.byteOffset, positions.length);
  let size = 16;
  while (size < vertexCount * 2) size *= 2;
  const table = new Int32Array(size).fill(-1);
  const places = new Uint32Array(vertexCount);
  for (let vertex = 0; vertex < vertexCount; vertex++) {
    const i3 = vertex * 3;
    let hash = 0;
    // 0 and -0 are the same place but differ in bits, so zero is hashed as 0.
    for (let axis = 0; axis < 3; axis++)
      hash = Math.imul(hash ^ (positions[i3 + axis] === 0 ? 0 : bits[i3 + axis]!), 0x9e3779b1);
    let slot = (hash ^ (hash >>> 15)) & (size - 1);
    for (;;) {
      const other = table[slot]!;
      if (other < 0) {
        table[slot] = vertex;
        places[vertex] = vertex;
        break;
      }
      const o3 = other * 3;
      if (
        positions[o3] === positions[i3] &&
        positions[o3 + 1] === positions[i3 + 1] &&
        positions[o3 + 2] === positions[i3 + 2]
      ) {
        places[vertex] = other;
        break;
      }
      slot = (slot + 1) & (size - 1);
    }
  }
  const corners = new Uint32Array(indices.length);
  for (let corner = 0; corner < indices.length; corner++)
    corners[corner] = places[indices[corner]!]!;
  return corners;
}

/**
 * Triangles lower than this share of the surface's extent have no say in shading: pictures are
 * rounded to 2⁻¹⁷ of it, which turns such slivers by several degrees.
 */
const SLIVER_SHARE = 1e-4;

/**
 * Unit normal of every triangle, flat xyz, zeros for slivers and triangles without area; and twice
 * their areas.
 */
function faceNormals(
  positions: Float32Array,
  indices: Uint32Array,
): { faces: Float32Array; areas: Float32Array } {
  const faces = new Float32Array(indices.length);
  const areas = new Float32Array(indices.length / 3);
  const leastHeight = SLIVER_SHARE * extentOf(positions);
  for (let i3 = 0; i3 < indices.length; i3 += 3) {
    const a = indices[i3]! * 3;
    const b = indices[i3 + 1]! * 3;
    const c = indices[i3 + 2]! * 3;
    const ux = positions[b]! - positions[a]!;
    const uy = positions[b + 1]! - positions[a + 1]!;
    const uz = positions[b + 2]! - positions[a + 2]!;
    const vx = positions[c]! - positions[a]!;
    const vy = positions[c + 1]! - positions[a + 1]!;
    const vz = positions[c + 2]! - positions[a + 2]!;
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const nz = ux * vy - uy * vx;
    const doubleArea = Math.sqrt(nx * nx + ny * ny + nz * nz);
    const wx = vx - ux;
    const wy = vy - uy;
    const wz = vz - uz;
    const longest = Math.sqrt(
      Math.max(
        ux * ux + uy * uy + uz * uz,
        vx * vx + vy * vy + vz * vz,
        wx * wx + wy * wy + wz * wz,
      ),
    );
    if (doubleArea === 0 || doubleArea < leastHeight * longest) continue;
    areas[i3 / 3] = doubleArea;
    faces[i3] = nx / doubleArea;
    faces[i3 + 1] = ny / doubleArea;
    faces[i3 + 2] = nz / doubleArea;
  }
  return { faces, areas };
}

/** Longest side of the box, in the unit of the positions. */
function extentOf(positions: Float32Array): number {
  let extent = 0;
  for (let axis = 0; axis < 3; axis++) {
    let low = Infinity;
    let high = -Infinity;
    for (let at = axis; at < positions.length; at += 3) {
      if (positions[at]! < low) low = positions[at]!;
      if (positions[at]! > high) high = positions[at]!;
    }
    extent = Math.max(extent, high - low);
  }
  return extent;
}

/** For every half-edge (corner to next corner) its opposite half-edge, or -1. */
function edgePartners(corners: Uint32Array): Int32Array {
  const partners = new Int32Array(corners.length).fill(-1);
  let size = 16;
  while (size < corners.length * 2) size *= 2;
  const table = new Int32Array(size).fill(-1);
  for (let edge = 0; edge < corners.length; edge++) {
    const from = corners[edge]!;
    const to = corners[nextCorner(edge)]!;
    const low = Math.min(from, to);
    const high = Math.max(from, to);
    let slot = (Math.imul(low, 0x9e3779b1) ^ Math.imul(high, 0x85ebca6b)) & (size - 1);
    for (;;) {
      const other = table[slot]!;
      if (other < 0) {
        table[slot] = edge;
        break;
      }
      // A third triangle on an edge finds no free partner and stays alone: it is drawn as an edge.
      if (partners[other] === -1 && corners[other] === to && corners[nextCorner(other)] === from) {
        partners[other] = edge;
        partners[edge] = other;
        break;
      }
      slot = (slot + 1) & (size - 1);
    }
  }
  return partners;
}

function nextCorner(corner: number): number {
  return corner % 3 === 2 ? corner - 2 : corner + 1;
}

function previousCorner(corner: number): number {
  return corner % 3 === 0 ? corner + 2 : corner - 1;
}

/** Whether the surface bends sharply between two triangles. One without a normal has no say. */
function isCrease(faces: Float32Array, a: number, b: number, crease: number): boolean {
  const ax = faces[a]!;
  const ay = faces[a + 1]!;
  const az = faces[a + 2]!;
  const bx = faces[b]!;
  const by = faces[b + 1]!;
  const bz = faces[b + 2]!;
  if ((ax === 0 && ay === 0 && az === 0) || (bx === 0 && by === 0 && bz === 0)) return false;
  return ax * bx + ay * by + az * bz < crease;
}

function hasNormal(faces: Float32Array, face: number): boolean {
  return faces[face] !== 0 || faces[face + 1] !== 0 || faces[face + 2] !== 0;
}

/** Sums the normals of the triangles round a corner, by area, up to the next edge on either side. */
function cornerNormals(
  corners: Uint32Array,
  faces: Float32Array,
  areas: Float32Array,
  partners: Int32Array,
  crease: number,
): Float32Array {
  const normals = new Float32Array(corners.length * 3);
  for (let corner = 0; corner < corners.length; corner++) {
    const own = corner - (corner % 3);
    const ownArea = areas[own / 3]!;
    let nx = faces[own]! * ownArea;
    let ny = faces[own + 1]! * ownArea;
    let nz = faces[own + 2]! * ownArea;
    let closed = false;
    for (let direction = 0; direction < 2 && !closed; direction++) {
      let at = corner;
      // A sliver between two faces must not join them, so each is held against the last good one.
      let known = own;
      // A fan of more triangles than this is not a fan but a fault in the mesh.
      for (let guard = 0; guard < 256; guard++) {
        const partner = partners[direction === 0 ? at : previousCorner(at)]!;
        if (partner < 0) break;
        const face = partner - (partner % 3);
        if (isCrease(faces, known, face, crease)) break;
        at = direction === 0 ? nextCorner(partner) : partner;
        closed = at === corner;
        if (closed) break;
        if (hasNormal(faces, face)) known = face;
        const area = areas[face / 3]!;
        nx += faces[face]! * area;
        ny += faces[face + 1]! * area;
        nz += faces[face + 2]! * area;
      }
    }
    const length = Math.sqrt(nx * nx + ny * ny + nz * nz) || 1;
    normals[corner * 3] = nx / length;
    normals[corner * 3 + 1] = ny / length;
    normals[corner * 3 + 2] = nz / length;
  }
  return normals;
}

function isBent(faces: Float32Array, edge: number, partner: number, crease: number): boolean {
  return isCrease(faces, edge - (edge % 3), partner - (partner % 3), crease);
}

function creaseLines(
  positions: Float32Array,
  indices: Uint32Array,
  corners: Uint32Array,
  faces: Float32Array,
  partners: Int32Array,
  crease: number,
): Float32Array {
  const edges: number[] = [];
  for (let edge = 0; edge < corners.length; edge++) {
    const partner = partners[edge]!;
    if (partner >= 0 && (partner < edge || !isBent(faces, edge, partner, crease))) continue;
    if (corners[edge] === corners[nextCorner(edge)]) continue;
    edges.push(edge);
  }
  const ends = new Uint32Array(edges.length * 2);
  const lengths = new Float32Array(edges.length);
  const lines = new Float32Array(edges.length * 6);
  edges.forEach((edge, index) => {
    ends[index * 2] = corners[edge]!;
    ends[index * 2 + 1] = corners[nextCorner(edge)]!;
    const from = indices[edge]! * 3;
    const to = indices[nextCorner(edge)]! * 3;
    let squared = 0;
    for (let axis = 0; axis < 3; axis++) {
      lines[index * 6 + axis] = positions[from + axis]!;
      lines[index * 6 + 3 + axis] = positions[to + axis]!;
      squared += (positions[to + axis]! - positions[from + axis]!) ** 2;
    }
    lengths[index] = Math.sqrt(squared);
  });
  const drawn = drawableEdges(ends, lengths, positions.length / 3, extentOf(positions));
  return lines.filter((_value, at) => drawn[Math.floor(at / 6)] === 1);
}

function expand(positions: Float32Array, indices: Uint32Array): Float32Array {
  const expanded = new Float32Array(indices.length * 3);
  for (let corner = 0; corner < indices.length; corner++) {
    const i3 = indices[corner]! * 3;
    expanded[corner * 3] = positions[i3]!;
    expanded[corner * 3 + 1] = positions[i3 + 1]!;
    expanded[corner * 3 + 2] = positions[i3 + 2]!;
  }
  return expanded;
}
