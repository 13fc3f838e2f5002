import { cividisAt } from './cividis';

/** Surface whose thickness is not known. */
const unknown = [0.72, 0.72, 0.7] as const;

/**
 * Colours of a surface by wall thickness, for corners that are not shared: rgb, linear, three corners a
 * triangle. @param indices vertices of the triangles; @param walls thickness a vertex, 0 for unknown
 * @param toMm where the scale ends; thicker walls take its last colour
 */
export function wallColours(indices: Uint32Array, walls: Float32Array, toMm: number): Float32Array {
  const colours = new Float32Array(3 * indices.length);
  for (let corner = 0; corner < indices.length; corner++) {
    const wall = walls[indices[corner]!]!;
    const rgb = wall > 0 ? cividisAt(wall / toMm).map(linear) : unknown;
    colours.set(rgb, 3 * corner);
  }
  return colours;
}

/** sRGB to linear light (IEC 61966-2-1). */
function linear(value: number): number {
  return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
}
