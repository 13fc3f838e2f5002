/** How much of a file `sniffStl` wants to see. */
export const SNIFFED_BYTES = 1024;

/** First bytes of files that people mistake for a model or that other programs save. */
const OTHER_FILES: readonly (readonly [start: string, what: string])[] = [
  ['PK\x03\x04', 'a ZIP archive or 3MF'],
  ['\x89PNG', 'a PNG picture'],
  ['\xff\xd8\xff', 'a JPEG picture'],
  ['GIF8', 'a GIF picture'],
  ['%PDF', 'a PDF'],
  ['glTF', 'a glTF model'],
  ['ply\n', 'a PLY model'],
  ['ply\r', 'a PLY model'],
  ['ISO-10303-21', 'a STEP model'],
  ['\x1f\x8b', 'a gzip archive'],
  ['7z\xbc\xaf', 'a 7z archive'],
  ['Rar!', 'a RAR archive'],
];

/**
 * Null when a file may be an STL; else a sentence that says what it is instead. Only what is
 * certain is refused here: the inspection reads the whole file and says exactly what is wrong.
 * Binary size 84 + 50·n: 3D Systems, StereoLithography Interface Specification, 1989.
 * @param head the first bytes, up to `SNIFFED_BYTES`
 * @param fileBytes size of the whole file
 */
export function sniffStl(head: Buffer, fileBytes: number): string | null {
  if (head.length >= 84 && fileBytes === 84 + 50 * head.readUInt32LE(80)) return null;
  const start = head.toString('latin1');
  const other = OTHER_FILES.find(([mark]) => start.startsWith(mark));
  if (other) return `This is ${other[1]}, not an STL file. Export the model as STL.`;
  const text = start.replace(/^\xef\xbb\xbf/, '').trimStart();
  if (/^solid\b/i.test(text) || /\bfacet\b/i.test(text)) return null;
  // eslint-disable-next-line no-control-regex
  const isText = !/[\x00-\x08\x0e-\x1f]/.test(start);
  if (isText) return `This is not an STL file: it begins with “${shown(head)}”.`;
  if (fileBytes < 84)
    return `This is not an STL file: a binary STL has at least 84 bytes, this file has ${fileBytes}.`;
  return null;
}

function shown(head: Buffer): string {
  return head.toString('utf8').trim().replace(/\s+/g, ' ').replaceAll('\ufffd', '').slice(0, 24);
}
