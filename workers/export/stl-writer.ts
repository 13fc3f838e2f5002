// The package has no types; a reference takes ours along into every program that imports this file.
// eslint-disable-next-line @typescript-eslint/triple-slash-reference
/// <reference path="../types/jscad-stl-serializer.d.ts" />
import { serializeBinary } from '@jscad/stl-serializer/CSGToStlb.js';

const HEADER_BYTES = 80;
const FACET_BYTES = 50;
/** The serializer takes polygon objects; this many are kept and filled again, whatever the size. */
const FACETS_PER_BATCH = 8192;
const IDENTITY = [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1];

interface PooledPolygon {
  vertices: [number[], number[], number[]];
  plane: number[];
}

/**
 * Binary STL of one mesh, little-endian, 84 + 50·n bytes, with the true unit normal of each facet
 * (zero for a facet without area). Coordinates are written exactly as given.
 *
 * Memory beyond the result is constant: facets pass through the serializer in batches.
 *
 * @param mesh   positions flat xyz (mm), float32; indices 3 a facet, counter-clockwise from outside
 * @param title  header text; kept to printable ASCII, cut at 80 bytes, never begins with "solid"
 *               (readers take that for ASCII STL)
 * Source: 3D Systems, StereoLithography Interface Specification, 1989 (as reprinted in M. Burns,
 * Automated Fabrication, section 6.5).
 */
export function writeStl(
  mesh: { readonly positions: Float32Array; readonly indices: Uint32Array },
  title: string,
): Uint8Array<ArrayBuffer> {
  const { positions, indices } = mesh;
  const facets = indices.length / 3;
  const bytes = new Uint8Array(HEADER_BYTES + 4 + FACET_BYTES * facets);
  bytes.set(headerBytes(title));
  new DataView(bytes.buffer).setUint32(HEADER_BYTES, facets, true);
  const pool = makePool(Math.min(FACETS_PER_BATCH, facets));
  for (let start = 0; start < facets; start += FACETS_PER_BATCH) {
    const count = Math.min(FACETS_PER_BATCH, facets - start);
    for (let i = 0; i < count; i++) fillPolygon(pool[i], positions, indices, 3 * (start + i));
    const polygons = count === pool.length ? pool : pool.slice(0, count);
    const [, , body] = serializeBinary([{ polygons, transforms: IDENTITY }], {});
    bytes.set(new Uint8Array(body), HEADER_BYTES + 4 + FACET_BYTES * start);
  }
  return bytes;
}

function headerBytes(title: string): Uint8Array {
  const printable = title.replace(/[^ -~]/g, '?');
  const safe = /^\s*solid/i.test(printable) ? `STL ${printable}` : printable;
  return new TextEncoder().encode(safe.slice(0, HEADER_BYTES).padEnd(HEADER_BYTES, ' '));
}

function makePool(size: number): PooledPolygon[] {
  return Array.from({ length: size }, () => ({
    vertices: [
      [0, 0, 0],
      [0, 0, 0],
      [0, 0, 0],
    ],
    plane: [0, 0, 0, 0],
  }));
}

function fillPolygon(
  polygon: PooledPolygon,
  positions: Float32Array,
  indices: Uint32Array,
  first: number,
): void {
  for (let corner = 0; corner < 3; corner++) {
    const target = polygon.vertices[corner];
    const v3 = 3 * indices[first + corner];
    target[0] = positions[v3];
    target[1] = positions[v3 + 1];
    target[2] = positions[v3 + 2];
  }
  const [a, b, c] = polygon.vertices;
  const ux = b[0] - a[0];
  const uy = b[1] - a[1];
  const uz = b[2] - a[2];
  const vx = c[0] - a[0];
  const vy = c[1] - a[1];
  const vz = c[2] - a[2];
  const nx = uy * vz - uz * vy;
  const ny = uz * vx - ux * vz;
  const nz = ux * vy - uy * vx;
  const length = Math.hypot(nx, ny, nz);
  const scale = length > 0 ? 1 / length : 0;
  // The serializer reads a polygon's cached plane before it computes one of its own.
  polygon.plane[0] = nx * scale;
  polygon.plane[1] = ny * scale;
  polygon.plane[2] = nz * scale;
}
