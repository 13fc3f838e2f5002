import { applyMotion, type RigidMotion } from '../vectors/rigid-motion.js';
import { type EdgeReport, edgeReport, hashCorners, sameCorners } from './topology.js';
import { type TriangleMesh } from './triangle-mesh.js';
import { weldPoints } from './weld-points.js';

/** A mesh as a file with single-precision coordinates holds it. */
export interface RoundedMesh {
  /** Flat xyz, mm, length 3 × vertices. */
  readonly positions: Float32Array;
  readonly indices: Uint32Array;
  /** One a triangle, 0 for the model's own surface. */
  readonly tags: Int32Array;
  readonly report: EdgeReport;
}

/**
 * Moves a mesh, rounds its coordinates to float32, joins the vertices that rounding made equal,
 * drops triangles that collapsed and pairs of triangles that became each other's back, and checks
 * the edges of the rest: the mesh that a reader of the written file will find. Rounding can close
 * a gap or pinch a surface, so `report` may tell of faults that the mesh did not have.
 * O(vertices + triangles).
 */
export function roundAndWeld(mesh: TriangleMesh, motion: RigidMotion): RoundedMesh {
  const rounded = Float32Array.from(applyMotion(motion, mesh.positions));
  const welded = weldPoints(new Int32Array(rounded.buffer), 3);
  const indices = new Uint32Array(mesh.indices.length);
  const tags = new Int32Array(mesh.indices.length / 3);
  let filled = 0;
  for (let i = 0; i < mesh.indices.length; i += 3) {
    const a = welded.vertexOf[mesh.indices[i]];
    const b = welded.vertexOf[mesh.indices[i + 1]];
    const c = welded.vertexOf[mesh.indices[i + 2]];
    if (a === b || b === c || c === a) continue;
    if (mesh.tags !== undefined) tags[filled / 3] = mesh.tags[i / 3];
    indices[filled] = a;
    indices[filled + 1] = b;
    indices[filled + 2] = c;
    filled += 3;
  }
  // Without a joined vertex no two triangles can have become one.
  if (welded.count < rounded.length / 3) filled = dropBackToBack(indices, tags, filled);
  return packRounded(new Float32Array(welded.words.buffer), welded.count, indices, tags, filled);
}

/** Takes out pairs of triangles on the same vertices with opposite windings; returns the new end. */
function dropBackToBack(indices: Uint32Array, tags: Int32Array, end: number): number {
  const triangles = end / 3;
  let size = 16;
  while (size < 2 * triangles) size *= 2;
  const table = new Int32Array(size).fill(-1);
  const isDropped = new Uint8Array(triangles);
  for (let triangle = 0; triangle < triangles; triangle++) {
    let slot = hashCorners(indices, triangle) & (size - 1);
    while (table[slot] >= 0) {
      const other = table[slot];
      if (isDropped[other] === 0 && areBackToBack(indices, other, triangle)) break;
      slot = (slot + 1) & (size - 1);
    }
    if (table[slot] >= 0) {
      isDropped[table[slot]] = 1;
      isDropped[triangle] = 1;
    } else table[slot] = triangle;
  }
  let filled = 0;
  for (let triangle = 0; triangle < triangles; triangle++) {
    if (isDropped[triangle] === 1) continue;
    indices.copyWithin(filled, 3 * triangle, 3 * triangle + 3);
    tags[filled / 3] = tags[triangle];
    filled += 3;
  }
  return filled;
}

function areBackToBack(indices: Uint32Array, one: number, other: number): boolean {
  if (!sameCorners(indices, one, other)) return false;
  const a = indices[3 * one];
  const b = indices[3 * one + 1];
  for (let corner = 0; corner < 3; corner++) {
    if (indices[3 * other + corner] !== a) continue;
    return indices[3 * other + ((corner + 1) % 3)] !== b;
  }
  return false;
}

/** Cuts the arrays to length and leaves out vertices that no triangle uses any more. */
function packRounded(
  vertices: Float32Array,
  count: number,
  indices: Uint32Array,
  tags: Int32Array,
  end: number,
): RoundedMesh {
  const numberOf = new Int32Array(count).fill(-1);
  for (let i = 0; i < end; i++) numberOf[indices[i]] = 0;
  let used = 0;
  for (let vertex = 0; vertex < count; vertex++) {
    if (numberOf[vertex] === 0) numberOf[vertex] = used++;
  }
  const positions = new Float32Array(3 * used);
  for (let vertex = 0; vertex < count; vertex++) {
    const at = 3 * numberOf[vertex];
    if (at < 0) continue;
    positions[at] = vertices[3 * vertex];
    positions[at + 1] = vertices[3 * vertex + 1];
    positions[at + 2] = vertices[3 * vertex + 2];
  }
  const packed = indices.slice(0, end);
  for (let i = 0; i < end; i++) packed[i] = numberOf[packed[i]];
  return {
    positions,
    indices: packed,
    tags: tags.slice(0, end / 3),
    report: edgeReport({ indices: packed }),
  };
}
