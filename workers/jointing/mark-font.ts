import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import opentype, { type Font } from 'opentype.js';

/** Straight pieces that stand for one curve of a letter. */
const CURVE_STEPS = 3;

/** Outlines of a line of text, mm: counter-clockwise or clockwise as the font has them. */
export interface TextOutlines {
  readonly contours: [number, number][][];
  readonly widthMm: number;
}

let font: Font | undefined;

/** Roboto Bold as shipped with the app; read once. */
function markFont(): Font {
  if (!font) {
    const require = createRequire(import.meta.url);
    const bytes = readFileSync(
      require.resolve('@fontsource/roboto/files/roboto-latin-700-normal.woff'),
    );
    font = opentype.parse(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength),
    );
  }
  return font;
}

/**
 * The outlines of a line of letters and digits standing on y = 0, its capitals `heightMm` high,
 * letter by letter without kerning.
 */
export function textOutlines(text: string, heightMm: number): TextOutlines {
  const letters = markFont();
  const capitals = letters.charToGlyph('H').getBoundingBox().y2;
  const size = (heightMm * letters.unitsPerEm) / capitals;
  const contours: [number, number][][] = [];
  let x = 0;
  for (const character of text) {
    const glyph = letters.charToGlyph(character);
    contours.push(...flatten(glyph.getPath(x, 0, size).commands));
    x += ((glyph.advanceWidth ?? 0) * size) / letters.unitsPerEm;
  }
  return { contours, widthMm: x };
}

type Command = ReturnType<ReturnType<Font['charToGlyph']>['getPath']>['commands'][number];

/** Paths of a font have y downward; here it is turned up. */
function flatten(commands: readonly Command[]): [number, number][][] {
  const contours: [number, number][][] = [];
  let contour: [number, number][] = [];
  let [x, y] = [0, 0];
  for (const command of commands) {
    if (command.type === 'Z') continue;
    if (command.type === 'M') {
      contour = [];
      contours.push(contour);
    }
    const steps = command.type === 'Q' || command.type === 'C' ? CURVE_STEPS : 1;
    for (let step = 1; step <= steps; step++) {
      const [px, py] = pointOn(command, x, y, step / steps);
      contour.push([px, 0 - py]);
    }
    [x, y] = [command.x, command.y];
  }
  return contours.filter(({ length }) => length >= 3);
}

function pointOn(command: Exclude<Command, { type: 'Z' }>, x: number, y: number, t: number) {
  const s = 1 - t;
  if (command.type === 'Q')
    return [
      s * s * x + 2 * s * t * command.x1 + t * t * command.x,
      s * s * y + 2 * s * t * command.y1 + t * t * command.y,
    ];
  if (command.type === 'C')
    return [
      s * s * s * x +
        3 * s * s * t * command.x1 +
        3 * s * t * t * command.x2 +
        t * t * t * command.x,
      s * s * s * y +
        3 * s * s * t * command.y1 +
        3 * s * t * t * command.y2 +
        t * t * t * command.y,
    ];
  return [command.x, command.y];
}
