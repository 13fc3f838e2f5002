import type { MeshReading } from './mesh-reading.js';
import { looksLikeObj, readObj } from './obj-reader.js';
import { refuseFile } from './refusal-words.js';
import { isProvenBinary } from './binary-stl.js';
import { readStl } from './stl-reader.js';
import { isZip, readThreeMf } from './threemf/threemf-reader.js';

export interface ReadingOptions {
  /** Numbers of the parts to take; null or absent takes all. */
  readonly parts?: readonly number[] | null;
  /** Stage and share read, 0 to 1; may throw to stop. */
  readonly onProgress?: (stage: string, fraction: number) => void;
}

/**
 * Reads a model, whatever it is: STL (binary or ASCII), OBJ or 3MF. The bytes decide, not the name.
 * Does not change `bytes`. Throws a JobRefusal with a sentence when the file cannot be read as a
 * whole, for a file that is read in part is another shape.
 */
export function readModel(
  bytes: Uint8Array,
  fileName: string,
  { parts = null, onProgress = () => {} }: ReadingOptions = {},
): MeshReading {
  if (bytes.length === 0) throw refuseFile(fileName, 'is empty.');
  const report = (fraction: number) => onProgress('Reading', fraction);
  const reading =
    isZip(bytes) && !isProvenBinary(bytes)
      ? readThreeMf(bytes, fileName, parts, report)
      : looksLikeObj(bytes)
        ? readObj(bytes, fileName, parts, report)
        : readStl(bytes, fileName, report);
  if (parts !== null) refuseUnknownParts(reading, parts, fileName);
  return reading;
}

function refuseUnknownParts(
  reading: MeshReading,
  parts: readonly number[],
  fileName: string,
): void {
  const count = Math.max(1, reading.parts.length);
  const unknown = parts.find((part) => part >= count);
  if (unknown !== undefined)
    throw refuseFile(
      fileName,
      `has no part ${unknown + 1}: it holds ${count === 1 ? 'one part' : `${count} parts`}.`,
    );
}
