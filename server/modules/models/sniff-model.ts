/** How much of a file `sniffModel` wants to see. */
export const SNIFFED_BYTES = 1024;

/** First bytes of files that people mistake for a model or that other programs save. */
const OTHER_FILES: readonly (readonly [start: string, what: string])[] = [
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

/** First words of OBJ lines, and the entries with which a 3MF package begins. */
const OBJ_LINE = /^(?:#[^\n\r]*[\n\r]\s*)*(?:v|vn|vt|vp|f|o|g|s|l|p|mtllib|usemtl)\s/;
const PACKAGE_ENTRY = /\[Content_Types\]\.xml|_rels\/|3D\/|Metadata\//;

/**
 * Null when a file may be an STL, OBJ or 3MF; else a sentence that says what it is instead. Only what
 * is certain is refused here: the inspection reads the whole file and says exactly what is wrong.
 * Binary size 84 + 50·n: 3D Systems, StereoLithography Interface Specification, 1989.
 * @param head the first bytes, up to `SNIFFED_BYTES`
 * @param fileBytes size of the whole file
 * @param fileName as the person gave it; only decides about ZIP archives
 */
export function sniffModel(head: Buffer, fileBytes: number, fileName: string): string | null {
  if (head.length >= 84 && fileBytes === 84 + 50 * head.readUInt32LE(80)) return null;
  const start = head.toString('latin1');
  if (start.startsWith('PK\x03\x04'))
    return /\.3mf$/i.test(fileName) || PACKAGE_ENTRY.test(start)
      ? null
      : 'This is a ZIP archive. Unpack it and upload the model inside.';
  const other = OTHER_FILES.find(([mark]) => start.startsWith(mark));
  if (other) return `This is ${other[1]}. Seamwright reads STL, OBJ and 3MF.`;
  const text = start.replace(/^\xef\xbb\xbf/, '').trimStart();
  if (/^solid\b/i.test(text) || /\bfacet\b/i.test(text) || OBJ_LINE.test(text)) return null;
  // A file of remarks only, as far as can be seen.
  if (text.startsWith('#') && /\.obj$/i.test(fileName)) return null;
  // eslint-disable-next-line no-control-regex
  const isText = !/[\x00-\x08\x0e-\x1f]/.test(start);
  if (isText) return `This is no STL, OBJ or 3MF file: it begins with “${shown(head)}”.`;
  if (fileBytes < 84)
    return `This is no STL, OBJ or 3MF file: even the smallest has more than its ${fileBytes} bytes.`;
  return null;
}

function shown(head: Buffer): string {
  return head.toString('utf8').trim().replace(/\s+/g, ' ').replaceAll('\ufffd', '').slice(0, 24);
}
