import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/**
 * Our stored form of a solid, little-endian:
 * 0 magic "SWTM", 4 version, 8 vertex count, 12 triangle count, 16 flags, 20 zero;
 * 24 positions (float64, or float32 with flag 1: only when that loses nothing),
 * then indices (uint32), then with flag 2 tags (int32).
 */
const magic = 0x4d545753;
const version = 1;
const headerBytes = 24;
const isSinglePrecision = 1;
const hasTags = 2;

/** Packs a mesh into one buffer. Loses nothing: positions become float32 only when all of them are. */
export function encodeMesh(mesh: TriangleMesh): Uint8Array {
  const { positions, indices, tags } = mesh;
  const single = isExactInSingle(positions);
  const positionBytes = positions.length * (single ? 4 : 8);
  const total = headerBytes + positionBytes + 4 * indices.length + 4 * (tags?.length ?? 0);
  const buffer = new ArrayBuffer(total);
  const flags = (single ? isSinglePrecision : 0) | (tags ? hasTags : 0);
  new Uint32Array(buffer, 0, 6).set([
    magic,
    version,
    positions.length / 3,
    indices.length / 3,
    flags,
    0,
  ]);
  if (single) new Float32Array(buffer, headerBytes, positions.length).set(positions);
  else new Float64Array(buffer, headerBytes, positions.length).set(positions);
  new Uint32Array(buffer, headerBytes + positionBytes, indices.length).set(indices);
  if (tags)
    new Int32Array(buffer, headerBytes + positionBytes + 4 * indices.length, tags.length).set(tags);
  return new Uint8Array(buffer);
}

/**
 * Unpacks what encodeMesh made. The mesh owns its arrays. Throws an Error on anything else: another
 * magic or version, a wrong length, an index out of range, a coordinate that is not finite.
 */
export function decodeMesh(bytes: Uint8Array): TriangleMesh {
  if (bytes.length < headerBytes) throw new Error('A stored mesh is shorter than its header.');
  const aligned = bytes.byteOffset % 8 === 0 ? bytes : new Uint8Array(bytes);
  const { buffer, byteOffset } = aligned;
  const header = new Uint32Array(buffer, byteOffset, 6);
  if (header[0] !== magic) throw new Error('Not a stored mesh.');
  if (header[1] !== version) throw new Error(`A stored mesh has the unknown version ${header[1]}.`);
  const vertices = header[2];
  const triangles = header[3];
  const single = (header[4] & isSinglePrecision) !== 0;
  const tagged = (header[4] & hasTags) !== 0;
  const positionBytes = 3 * vertices * (single ? 4 : 8);
  const total = headerBytes + positionBytes + 12 * triangles + (tagged ? 4 * triangles : 0);
  if (bytes.length !== total)
    throw new Error(`A stored mesh has ${bytes.length} bytes instead of ${total}.`);
  const at = byteOffset + headerBytes;
  const stored = single
    ? new Float32Array(buffer, at, 3 * vertices)
    : new Float64Array(buffer, at, 3 * vertices);
  const positions = new Float64Array(stored);
  for (let i = 0; i < positions.length; i++)
    if (!Number.isFinite(positions[i]))
      throw new Error('A stored mesh holds a coordinate that is not finite.');
  const indices = new Uint32Array(buffer, at + positionBytes, 3 * triangles).slice();
  for (let i = 0; i < indices.length; i++)
    if (indices[i] >= vertices) throw new Error('A stored mesh names a vertex that it lacks.');
  if (!tagged) return { positions, indices };
  const tagsAt = at + positionBytes + 12 * triangles;
  return { positions, indices, tags: new Int32Array(buffer, tagsAt, triangles).slice() };
}

function isExactInSingle(positions: Float64Array): boolean {
  for (let i = 0; i < positions.length; i++)
    if (Math.fround(positions[i]) !== positions[i]) return false;
  return true;
}
