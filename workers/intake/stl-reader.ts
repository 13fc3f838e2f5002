import { readAsciiStl } from './ascii-stl.js';
import { lettersOf } from './ascii-cursor.js';
import { isProvenBinary, readBinaryStl } from './binary-stl.js';
import type { MeshReading } from './mesh-reading.js';
import { countOf, refuseFile } from './refusal-words.js';

/** An STL file states no unit and is one part. */
const unitless = { fileUnit: null, parts: [] } as const;
const solid = lettersOf('solid');
const binaryHeaderBytes = 84;
/** How far to look for bytes that no text holds. */
const sniffedBytes = 4096;

/**
 * Reads an STL file, binary or ASCII, and welds it. Does not change `bytes`. Beside them it needs about
 * 50 bytes a facet, the mesh included.
 * @param onProgress share read, 0 to 1, every 33 000 facets; may throw to stop
 * Throws a JobRefusal with a sentence when the file cannot be read as a whole: a file that is read in
 * part is another shape. Size first, words second: many binary files begin with "solid".
 */
export function readStl(
  bytes: Uint8Array,
  fileName: string,
  onProgress: (fraction: number) => void = () => {},
): MeshReading {
  if (bytes.length === 0) throw refuseFile(fileName, 'is empty.');
  if (isProvenBinary(bytes))
    return { format: 'stl-binary', ...unitless, ...readBinaryStl(bytes, fileName, onProgress) };
  const foreign = nameOfOtherFormat(bytes);
  if (foreign) throw refuseFile(fileName, foreign);
  const text = startOfText(bytes);
  if (startsWithSolid(bytes, text) && !holdsNul(bytes))
    return { format: 'stl-ascii', ...unitless, ...readAsciiStl(bytes, text, fileName, onProgress) };
  if (bytes.length < binaryHeaderBytes)
    throw refuseFile(
      fileName,
      `is too short to be an STL file (${countOf(bytes.length, 'byte')}).`,
    );
  if (!holdsNul(bytes) && isPrintable(bytes))
    throw refuseFile(
      fileName,
      'is a text file, but not an STL file: it does not begin with “solid”.',
    );
  return { format: 'stl-binary', ...unitless, ...readBinaryStl(bytes, fileName, onProgress) };
}

/** First byte behind a byte order mark and blanks. */
function startOfText(bytes: Uint8Array): number {
  let i = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  while (i < bytes.length && bytes[i] <= 32) i++;
  return i;
}

function startsWithSolid(bytes: Uint8Array, from: number): boolean {
  for (let i = 0; i < solid.length; i++) if ((bytes[from + i] | 0x20) !== solid[i]) return false;
  const after = bytes[from + solid.length];
  return after === undefined || after <= 32;
}

function holdsNul(bytes: Uint8Array): boolean {
  const nul = bytes.subarray(0, sniffedBytes).indexOf(0);
  return nul >= 0;
}

function isPrintable(bytes: Uint8Array): boolean {
  return bytes.subarray(0, sniffedBytes).every((byte) => byte >= 32 || (byte >= 9 && byte <= 13));
}

/** Well-known first bytes of what people bring by mistake; the sentence goes on after the file's name. */
function nameOfOtherFormat(bytes: Uint8Array): string | null {
  if (bytes[0] === 0x1f && bytes[1] === 0x8b)
    return 'is a compressed file (gzip). Unpack it and bring the STL file inside.';
  if (bytes[startOfText(bytes)] === 0x3c)
    return 'is a web page or XML file, not an STL file. The download may have failed.';
  return null;
}
