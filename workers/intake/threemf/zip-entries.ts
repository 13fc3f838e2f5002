import { Unzip, UnzipInflate, UnzipPassThrough } from 'fflate';
import { JobRefusal } from '../../runtime/job-refusal.js';
import { countOf, refuseFile } from '../refusal-words.js';

/** Limits against archives made to fill the memory. Own choice; sound files stay far below. */
const mostEntries = 10_000;
const mostInflatedBytes = 1.5 * 1024 ** 3;
/** XML deflates well, but not like a file of zeros. */
const largestRatio = 200;
/** Below this no ratio matters. */
const harmlessBytes = 1024 ** 2;
const sliceBytes = 1 << 16;

/** Whether the bytes begin like a ZIP archive. */
export function isZip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x50 && bytes[1] === 0x4b && bytes[2] === 3 && bytes[3] === 4;
}

/**
 * Inflates the entries that are wanted, piece by piece, counting what really comes out: stated sizes
 * are not believed. Names are those in the archive, without a leading slash.
 * Throws a JobRefusal on broken or encrypted archives and beyond the limits.
 */
export function readZipEntries(
  bytes: Uint8Array,
  fileName: string,
  isWanted: (name: string) => boolean,
  onProgress: (fraction: number) => void,
): Map<string, Uint8Array> {
  const found = new Map<string, Uint8Array>();
  const open: { name: string; chunks: Uint8Array[] }[] = [];
  let entries = 0;
  let inflated = 0;
  let taken = 0;
  const unzip = new Unzip((file) => {
    if (++entries > mostEntries)
      throw refuseFile(
        fileName,
        `holds more than ${countOf(mostEntries, 'entry', 'entries')}. It is damaged or made to do harm.`,
      );
    const name = file.name.replace(/^\/+/, '');
    if (!isWanted(name) || found.has(name)) return;
    const entry = { name, chunks: [] as Uint8Array[] };
    open.push(entry);
    file.ondata = (error, chunk, isLast) => {
      if (error) throw error;
      inflated += chunk.length;
      if (
        inflated > mostInflatedBytes ||
        (inflated > harmlessBytes && inflated > largestRatio * taken)
      )
        throw refuseFile(
          fileName,
          'unpacks to far more than a model needs. It is damaged or made to do harm.',
        );
      entry.chunks.push(chunk);
      if (isLast) found.set(name, joined(entry.chunks));
    };
    file.start();
  });
  unzip.register(UnzipInflate);
  unzip.register(UnzipPassThrough);
  try {
    for (let from = 0; from < bytes.length; from += sliceBytes) {
      const slice = bytes.subarray(from, from + sliceBytes);
      taken = from + slice.length;
      unzip.push(slice, taken === bytes.length);
      onProgress(taken / bytes.length);
    }
  } catch (error) {
    if (error instanceof JobRefusal || isForeign(error)) throw error;
    throw refuseFile(
      fileName,
      `cannot be unpacked (${wordsOf(error)}). It was cut off while being saved or sent, or is damaged.`,
    );
  }
  if (open.some((entry) => !found.has(entry.name)))
    throw refuseFile(
      fileName,
      'ends in the middle of an entry. It was cut off while being saved or sent.',
    );
  return found;
}

/** Errors of the ZIP library carry a number; anything else, such as a cancellation, is passed on. */
function isForeign(error: unknown): boolean {
  return !(error instanceof Error && 'code' in error && typeof error.code === 'number');
}

function wordsOf(error: unknown): string {
  return (error instanceof Error ? error.message : String(error)).slice(0, 60);
}

function joined(chunks: readonly Uint8Array[]): Uint8Array {
  const whole = new Uint8Array(chunks.reduce((sum, chunk) => sum + chunk.length, 0));
  let at = 0;
  for (const chunk of chunks) {
    whole.set(chunk, at);
    at += chunk.length;
  }
  return whole;
}
