const HEADER_BYTES = 80;
const FACET_BYTES = 50;

/** What the bytes of one written file hold, read without any help from the code that wrote them. */
export interface WrittenFile {
  /** Facets the count field claims. */
  facetsClaimed: number;
  /** Facets that are really there, whole. */
  facets: number;
  /** Whether the size is exactly 84 + 50 × the claimed count. */
  sizeMatches: boolean;
  /** Whether every coordinate is a finite number. */
  finite: boolean;
  /** Flat xyz of the corners, 9 a facet, in the file's unit (mm). */
  corners: Float32Array;
}

/**
 * Reads a binary STL, byte by byte as the format's description says. Never throws: bytes too short
 * for a header give zero facets and `sizeMatches` false.
 */
export function readWrittenStl(bytes: Uint8Array): WrittenFile {
  if (bytes.byteLength < HEADER_BYTES + 4)
    return {
      facetsClaimed: 0,
      facets: 0,
      sizeMatches: false,
      finite: true,
      corners: new Float32Array(0),
    };
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const facetsClaimed = view.getUint32(HEADER_BYTES, true);
  const room = Math.floor((bytes.byteLength - HEADER_BYTES - 4) / FACET_BYTES);
  const facets = Math.min(facetsClaimed, room);
  const corners = new Float32Array(9 * facets);
  let finite = true;
  for (let facet = 0; facet < facets; facet++) {
    const at = HEADER_BYTES + 4 + FACET_BYTES * facet + 12;
    for (let k = 0; k < 9; k++) {
      const value = view.getFloat32(at + 4 * k, true);
      if (!Number.isFinite(value)) finite = false;
      corners[9 * facet + k] = value;
    }
  }
  const sizeMatches = bytes.byteLength === HEADER_BYTES + 4 + FACET_BYTES * facetsClaimed;
  return { facetsClaimed, facets, sizeMatches, finite, corners };
}
