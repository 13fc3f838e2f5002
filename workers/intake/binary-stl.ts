import { FacetWelder } from './facet-welder.js';
import { largestCoordinate, refuseCoordinates } from './coordinate-limits.js';
import type { MeshReading } from './mesh-reading.js';
import { countOf, refuseFile, spelledCount } from './refusal-words.js';

/**
 * Binary STL: 80-byte header, uint32 count, 50 bytes a facet, little-endian (3D Systems,
 * StereoLithography Interface Specification, 1989). Facet: normal 12 bytes, three corners of
 * 12 bytes, 2 bytes that nobody agrees on.
 */
const headerBytes = 84;
const facetBytes = 50;
const normalBytes = 12;
/** Facets that are taken at once: bounds what is held beside the file and the mesh. */
const chunkFacets = 1 << 15;

const magnitudeMask = 0x7fffffff;
const infinityBits = 0x7f800000;
const largestCoordinateBits = new Int32Array(new Float32Array([largestCoordinate]).buffer)[0];

/** The count a binary header states, or null when the file is shorter than a header. */
function statedFacets(bytes: Uint8Array, littleEndian: boolean): number | null {
  if (bytes.length < headerBytes) return null;
  return new DataView(bytes.buffer, bytes.byteOffset + 80, 4).getUint32(0, littleEndian);
}

/** Whether the size is exactly that of a binary STL with the count it states. */
function hasExactSize(bytes: Uint8Array, littleEndian: boolean): boolean {
  const stated = statedFacets(bytes, littleEndian);
  return stated !== null && bytes.length === headerBytes + facetBytes * stated;
}

/** Whether the size alone proves a binary STL, also one written in the other byte order. */
export function isProvenBinary(bytes: Uint8Array): boolean {
  return hasExactSize(bytes, true) || hasExactSize(bytes, false);
}

/**
 * Reads a binary STL. Trailing bytes are left alone and noted; a count that the file does not hold,
 * or whole facets beyond the count, are refused, because nobody can tell which of the two is wrong.
 * A file in the other byte order is known by its count, and noted. Facets are welded as they come, so
 * beside the file and the mesh only a chunk of them is held.
 */
export function readBinaryStl(
  bytes: Uint8Array,
  fileName: string,
  onProgress: (fraction: number) => void,
): Pick<MeshReading, 'mesh' | 'facetsRead' | 'degenerateDropped' | 'notes' | 'timingsMs'> {
  const isReversed = !hasExactSize(bytes, true) && hasExactSize(bytes, false);
  const stated = statedFacets(bytes, !isReversed) ?? 0;
  const held = Math.floor((bytes.length - headerBytes) / facetBytes);
  if (stated > held) throw refuseMissing(bytes, fileName, stated, held);
  if (stated === 0) throw refuseFile(fileName, 'is an STL file without a single facet.');
  const notes: string[] = [];
  const left = bytes.length - headerBytes - facetBytes * stated;
  if (left > 0) {
    if (left % facetBytes === 0 && !isPadding(bytes, headerBytes + facetBytes * stated))
      throw refuseFile(
        fileName,
        `says that it holds ${countOf(stated, 'facet')} but holds ${spelledCount(held)}. Its count or its content is wrong; export the model again.`,
      );
    notes.push(
      `The file goes on for ${countOf(left, 'byte')} after its last facet. Nothing there was read.`,
    );
  }
  if (isReversed)
    notes.push('The numbers in the file stand in reversed byte order. They were turned round.');
  const welded = weldFacets(bytes, stated, isReversed, { fileName, onProgress });
  return { ...welded, facetsRead: stated, notes };
}

interface Unusable {
  notNumbers: number;
  tooLarge: number;
  /** From 1; 0 while there is none. */
  firstFacet: number;
}

/** Welds chunk by chunk; a coordinate that cannot be used ends the welding, but all are counted. */
function weldFacets(
  bytes: Uint8Array,
  facets: number,
  isReversed: boolean,
  { fileName, onProgress }: { fileName: string; onProgress: (fraction: number) => void },
): Pick<MeshReading, 'mesh' | 'degenerateDropped' | 'timingsMs'> {
  const welder = new FacetWelder(facets);
  const aligned = bytes.byteOffset % 4 === 0 ? bytes : bytes.slice();
  const chunk = new Int32Array(9 * Math.min(chunkFacets, facets));
  const unusable: Unusable = { notNumbers: 0, tooLarge: 0, firstFacet: 0 };
  let parseMs = 0;
  let weldMs = 0;
  for (let first = 0; first < facets; first += chunkFacets) {
    const count = Math.min(chunkFacets, facets - first);
    const start = performance.now();
    copyCorners(aligned, first, count, chunk);
    if (isReversed) reverseWords(chunk, 9 * count);
    countUnusable(chunk, 9 * count, first, unusable);
    const copied = performance.now();
    if (unusable.firstFacet === 0) welder.take(chunk, count);
    parseMs += copied - start;
    weldMs += performance.now() - copied;
    onProgress((first + count) / facets);
  }
  if (unusable.firstFacet > 0) throw refuseCoordinates(fileName, unusable);
  const start = performance.now();
  const welded = welder.finish();
  weldMs += performance.now() - start;
  return { ...welded, timingsMs: { parse: parseMs, weld: weldMs } };
}

/** Copies nine coordinates a facet bit by bit: no float is decoded, so this runs at memory speed. */
function copyCorners(aligned: Uint8Array, first: number, count: number, target: Int32Array): void {
  const words = new Int32Array(aligned.buffer, aligned.byteOffset, aligned.length >> 2);
  const halves = new Uint16Array(aligned.buffer, aligned.byteOffset, aligned.length >> 1);
  for (let facet = first, to = 0; facet < first + count; facet++, to += 9) {
    const from = headerBytes + normalBytes + facetBytes * facet;
    // 50 bytes a facet: every other one starts on a 4-byte border, the rest on a 2-byte border.
    if ((facet & 1) === 0) {
      const w = from >> 2;
      for (let k = 0; k < 9; k++) target[to + k] = words[w + k];
    } else {
      const h = from >> 1;
      for (let k = 0; k < 9; k++)
        target[to + k] = halves[h + 2 * k] | (halves[h + 2 * k + 1] << 16);
    }
  }
}

function reverseWords(words: Int32Array, end: number): void {
  for (let i = 0; i < end; i++) words[i] = reversed(words[i]);
}

/** Adds up coordinates that are not finite or beyond the limit, by their bits. */
function countUnusable(words: Int32Array, end: number, firstFacet: number, found: Unusable): void {
  for (let i = 0; i < end; i++) {
    const magnitude = words[i] & magnitudeMask;
    if (magnitude <= largestCoordinateBits) continue;
    if (magnitude >= infinityBits) found.notNumbers++;
    else found.tooLarge++;
    found.firstFacet ||= firstFacet + Math.floor(i / 9) + 1;
  }
}

function reversed(word: number): number {
  return (word >>> 24) | ((word >>> 8) & 0xff00) | ((word << 8) & 0xff0000) | ((word & 0xff) << 24);
}

function isPadding(bytes: Uint8Array, from: number): boolean {
  for (let i = from; i < bytes.length; i++) if (bytes[i] !== 0) return false;
  return true;
}

/** Fewer facets than stated: cut off, or no STL at all. What the file does hold decides which is said. */
function refuseMissing(bytes: Uint8Array, fileName: string, stated: number, held: number) {
  const sample = Math.min(held, 200);
  if (sample > 0) {
    const words = new Int32Array(9 * sample);
    copyCorners(bytes.byteOffset % 4 === 0 ? bytes : bytes.slice(), 0, sample, words);
    const unusable: Unusable = { notNumbers: 0, tooLarge: 0, firstFacet: 0 };
    countUnusable(words, words.length, 0, unusable);
    const share = (unusable.notNumbers + unusable.tooLarge) / (9 * sample);
    // A count and corners that make no sense together: other bytes under an STL's name.
    if (share > 0.05) return refuseFile(fileName, 'is not an STL file, neither binary nor text.');
  }
  return refuseFile(
    fileName,
    `says that it holds ${countOf(stated, 'facet')} but ${held === 0 ? 'holds none' : `ends after ${spelledCount(held)}`}. It was cut off while being saved or sent, or its count is wrong.`,
  );
}
