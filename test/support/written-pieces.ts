/** Box and volume of a binary STL, straight from its bytes (mm). */
export interface WrittenPiece {
  readonly facets: number;
  readonly size: readonly [number, number, number];
  readonly volumeMm3: number;
}

/** Reads a binary STL as its published layout says: 80 bytes, a count, 50 bytes a facet. */
export function measureBinaryStl(bytes: Uint8Array): WrittenPiece {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const facets = view.getUint32(80, true);
  if (bytes.length !== 84 + 50 * facets) throw new Error('The size does not match the count');
  const min = [Infinity, Infinity, Infinity];
  const max = [-Infinity, -Infinity, -Infinity];
  let volume = 0;
  const corner = new Float64Array(9);
  for (let facet = 0; facet < facets; facet++) {
    for (let k = 0; k < 9; k++) {
      const value = view.getFloat32(84 + 50 * facet + 12 + 4 * k, true);
      corner[k] = value;
      min[k % 3] = Math.min(min[k % 3]!, value);
      max[k % 3] = Math.max(max[k % 3]!, value);
    }
    const [ax, ay, az, bx, by, bz, cx, cy, cz] = corner as unknown as number[];
    volume +=
      (ax! * (by! * cz! - bz! * cy!) +
        ay! * (bz! * cx! - bx! * cz!) +
        az! * (bx! * cy! - by! * cx!)) /
      6;
  }
  return {
    facets,
    size: [max[0]! - min[0]!, max[1]! - min[1]!, max[2]! - min[2]!],
    volumeMm3: volume,
  };
}
