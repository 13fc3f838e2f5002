import { type Piece, type Seam } from '../../shared/jobs/plan-make.js';

const HEADER = [
  'item',
  'piece',
  'model',
  'width_mm',
  'depth_mm',
  'height_mm',
  'volume_mm3',
  'triangles',
  'fits',
  'meets',
  'file',
  'notes',
];

/**
 * The parts list as CSV: comma, CRLF, quotes doubled, one header line with the units (RFC 4180).
 * Sizes are as laid on the bed. A field that a spreadsheet would run as a formula gets an
 * apostrophe in front, as the OWASP page "CSV Injection" advises (from memory).
 */
export function cutListCsv(
  modelName: string,
  pieces: readonly Piece[],
  seams: readonly Seam[],
): string {
  const rows = pieces.map((piece) => [
    String(piece.item),
    piece.name,
    modelName,
    ...piece.sizeMm.map((size) => size.toFixed(3)),
    piece.volumeMm3.toFixed(3),
    String(piece.triangles),
    piece.fits ? 'yes' : 'no',
    neighboursOf(piece.name, seams).join(' '),
    piece.file,
    piece.notes.join(' '),
  ]);
  return [HEADER, ...rows].map((row) => row.map(csvField).join(',') + '\r\n').join('');
}

/** One field, made safe for a CSV line and for a spreadsheet that opens it. */
export function csvField(text: string): string {
  const harmless = /^[=+\-@\t\r\n]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}

function neighboursOf(name: string, seams: readonly Seam[]): string[] {
  const others = new Set<string>();
  for (const { between } of seams) {
    if (between[0] === name) others.add(between[1]);
    else if (between[1] === name) others.add(between[0]);
  }
  return [...others].sort();
}
