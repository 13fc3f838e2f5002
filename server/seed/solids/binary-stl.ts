/** A closed surface, mm; triangles wind counter-clockwise seen from outside. */
export interface Solid {
  /** Flat xyz. */
  readonly positions: readonly number[];
  /** Vertex numbers, three a triangle. */
  readonly indices: readonly number[];
}

const HEADER_BYTES = 80;
const FACET_BYTES = 50;

/** Binary STL: 80 bytes of header, a count, 50 bytes a facet (3D Systems, 1989). */
export function toBinaryStl(solid: Solid, title: string): Buffer {
  const count = solid.indices.length / 3;
  const bytes = Buffer.alloc(HEADER_BYTES + 4 + FACET_BYTES * count);
  bytes.write(title.slice(0, HEADER_BYTES), 'latin1');
  bytes.writeUInt32LE(count, HEADER_BYTES);
  for (let facet = 0; facet < count; facet++) {
    const corners = [0, 1, 2].map((corner) => cornerOf(solid, 3 * facet + corner));
    const [a = [], b = [], c = []] = corners;
    let at = HEADER_BYTES + 4 + FACET_BYTES * facet;
    for (const number of [...normalOf(a, b, c), ...a, ...b, ...c])
      at = bytes.writeFloatLE(number, at);
  }
  return bytes;
}

function cornerOf({ positions, indices }: Solid, corner: number): number[] {
  const vertex = 3 * (indices[corner] ?? 0);
  return positions.slice(vertex, vertex + 3);
}

function normalOf(a: number[], b: number[], c: number[]): number[] {
  const [ax = 0, ay = 0, az = 0] = a;
  const [bx = 0, by = 0, bz = 0] = b;
  const [cx = 0, cy = 0, cz = 0] = c;
  const [ux, uy, uz] = [bx - ax, by - ay, bz - az];
  const [vx, vy, vz] = [cx - ax, cy - ay, cz - az];
  const [x, y, z] = [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
  const length = Math.hypot(x, y, z) || 1;
  return [x / length, y / length, z / length];
}
