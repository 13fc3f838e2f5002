import { AsciiCursor, lettersOf } from './ascii-cursor.js';
import { largestCoordinate, refuseCoordinates } from './coordinate-limits.js';
import { FacetWelder } from './facet-welder.js';
import type { MeshReading } from './mesh-reading.js';
import { countOf, refuseFile } from './refusal-words.js';

const solid = lettersOf('solid');
const endsolid = lettersOf('endsolid');
const facet = lettersOf('facet');
const endfacet = lettersOf('endfacet');
const outer = lettersOf('outer');
const loop = lettersOf('loop');
const endloop = lettersOf('endloop');
const vertex = lettersOf('vertex');

/** A facet as most programs write it has more bytes: room is made for no more than can be expected. */
const usualFacetBytes = 150;
const chunkFacets = 1 << 14;

/**
 * Reads an ASCII STL from its bytes, in any case, with any line ends, with several `solid` blocks.
 * Names and normals are passed over. Refuses what is not three numbers a corner and three corners a
 * facet, and a file that ends inside a facet; says in which line.
 */
export function readAsciiStl(
  bytes: Uint8Array,
  from: number,
  fileName: string,
  onProgress: (fraction: number) => void,
): Pick<MeshReading, 'mesh' | 'facetsRead' | 'degenerateDropped' | 'notes' | 'timingsMs'> {
  const cursor = new AsciiCursor(bytes, from);
  const startMs = performance.now();
  const welder = new FacetWelder(Math.ceil(bytes.length / usualFacetBytes));
  const chunk = new Float32Array(9 * chunkFacets);
  const words = new Int32Array(chunk.buffer);
  let weldMs = 0;
  const weld = (count: number) => {
    const start = performance.now();
    if (unusable.firstFacet === 0) welder.take(words, count);
    weldMs += performance.now() - start;
  };
  const unusable = { notNumbers: 0, tooLarge: 0, firstFacet: 0 };
  let facets = 0;
  let solids = 0;
  let isOpen = false;
  let isEmpty = true;

  while (cursor.next()) {
    if (cursor.isAt(facet)) {
      readFacet(cursor, chunk, facets, fileName, unusable);
      facets++;
      if (isEmpty) solids++;
      isEmpty = false;
      if (facets % chunkFacets === 0) {
        weld(chunkFacets);
        onProgress(cursor.end / bytes.length);
      }
    } else if (cursor.isAt(solid)) {
      cursor.skipLine();
      isOpen = true;
      isEmpty = true;
    } else if (cursor.isAt(endsolid)) {
      cursor.skipLine();
      isOpen = false;
    } else throw refuseWord(cursor, fileName, 'a facet');
  }
  if (facets === 0) throw refuseFile(fileName, 'is an STL file without a single facet.');
  if (unusable.firstFacet > 0) throw refuseCoordinates(fileName, unusable);

  const notes: string[] = [];
  if (solids > 1)
    notes.push(`The file holds ${countOf(solids, 'solid')}. They were read as one model.`);
  if (isOpen) notes.push('The closing line of the file is missing. It may have been cut off.');
  weld(facets % chunkFacets);
  const welded = welder.finish();
  const parse = performance.now() - startMs - weldMs;
  return { ...welded, facetsRead: facets, notes, timingsMs: { parse, weld: weldMs } };
}

function readFacet(
  cursor: AsciiCursor,
  chunk: Float32Array,
  index: number,
  fileName: string,
  unusable: { notNumbers: number; tooLarge: number; firstFacet: number },
): void {
  // The normal is recomputed from the corners, so it may say anything: "normal", up to three words.
  let passed = 0;
  for (;;) {
    if (!cursor.next()) throw refuseEnd(fileName, index);
    if (cursor.isAt(outer)) break;
    if (++passed > 4) throw refuseWord(cursor, fileName, '“outer loop”');
  }
  expect(cursor, loop, '“loop”', fileName, index);
  let corners = 0;
  for (;;) {
    if (!cursor.next()) throw refuseEnd(fileName, index);
    if (cursor.isAt(endloop)) break;
    if (!cursor.isAt(vertex)) throw refuseWord(cursor, fileName, '“vertex” or “endloop”');
    for (let axis = 0; axis < 3; axis++) {
      if (!cursor.next()) throw refuseEnd(fileName, index);
      const value = cursor.number();
      if (value === undefined) throw refuseNumber(cursor, fileName);
      if (!(Math.abs(value) <= largestCoordinate)) {
        if (Number.isFinite(value)) unusable.tooLarge++;
        else unusable.notNumbers++;
        unusable.firstFacet ||= index + 1;
      }
      if (corners < 3) chunk[9 * (index % chunkFacets) + 3 * corners + axis] = value;
    }
    corners++;
  }
  if (corners !== 3)
    throw refuseFile(
      fileName,
      `has a facet of ${countOf(corners, 'corner')} in line ${cursor.line()}. STL knows triangles only; export the model as triangles.`,
    );
  expect(cursor, endfacet, '“endfacet”', fileName, index);
}

function expect(
  cursor: AsciiCursor,
  letters: Uint8Array,
  wanted: string,
  fileName: string,
  index: number,
): void {
  if (!cursor.next()) throw refuseEnd(fileName, index);
  if (!cursor.isAt(letters)) throw refuseWord(cursor, fileName, wanted);
}

function refuseEnd(fileName: string, index: number) {
  return refuseFile(
    fileName,
    `ends in the middle of facet ${index + 1}. It was cut off while being saved or sent.`,
  );
}

/** A word that nothing follows was most likely cut short itself. */
function isLastWord(cursor: AsciiCursor): boolean {
  return cursor.end === cursor.bytes.length;
}

function refuseWord(cursor: AsciiCursor, fileName: string, wanted: string) {
  if (isLastWord(cursor))
    return refuseFile(
      fileName,
      `ends in line ${cursor.line()} where ${wanted} should stand. It was cut off while being saved or sent.`,
    );
  return refuseFile(
    fileName,
    `has “${cursor.word(24)}” in line ${cursor.line()} where ${wanted} should stand. It is damaged or not an STL file.`,
  );
}

function refuseNumber(cursor: AsciiCursor, fileName: string) {
  if (isLastWord(cursor))
    return refuseFile(
      fileName,
      `ends in the middle of a number in line ${cursor.line()}. It was cut off while being saved or sent.`,
    );
  const word = cursor.word(24);
  if (/^[-+]?\d*,\d+(?:e[-+]?\d+)?$/i.test(word))
    return refuseFile(
      fileName,
      `writes numbers with a decimal comma (“${word}” in line ${cursor.line()}). Export it again with decimal points.`,
    );
  return refuseFile(
    fileName,
    `has “${word}” in line ${cursor.line()} where a number should stand. It is damaged or was cut off.`,
  );
}
