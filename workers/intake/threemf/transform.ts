/**
 * A 3MF transform: the 12 numbers of a 4×3 matrix, row by row, that a row vector is multiplied with
 * (3MF Core 1.4.0, 3.3 "3D Matrices"): x' = x·m0 + y·m3 + z·m6 + m9.
 */
export type Transform = readonly number[];

export const noTransform: Transform = [1, 0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0];

/** Reads the attribute; null when it is not 12 finite numbers. */
export function parseTransform(text: string): Transform | null {
  const numbers = text.trim().split(/\s+/).map(Number);
  return numbers.length === 12 && numbers.every(Number.isFinite) ? numbers : null;
}

/** The transform that does `first`, then `second`. */
export function thenTransform(first: Transform, second: Transform): Transform {
  const result: number[] = [];
  for (let row = 0; row < 4; row++)
    for (let column = 0; column < 3; column++) {
      let sum = row === 3 ? second[9 + column] : 0;
      for (let k = 0; k < 3; k++) sum += first[3 * row + k] * second[3 * k + column];
      result.push(sum);
    }
  return result;
}

/** Whether it turns left into right hands, so that triangles have to be turned round. */
export function isMirror([a, b, c, d, e, f, g, h, i]: Transform): boolean {
  return a * (e * i - f * h) - b * (d * i - f * g) + c * (d * h - e * g) < 0;
}
