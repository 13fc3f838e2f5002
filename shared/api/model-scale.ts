import * as z from 'zod';

/** How file units become millimetres. STL files carry no unit, so a person decides. */
export const modelScale = z.object({
  unit: z.enum(['mm', 'inch', 'other']),
  /** Millimetres per file unit when `unit` is `other`. */
  factor: z.number().gt(0).max(1e6).default(1),
  /** "Make it 900 mm tall": stretches the whole model evenly until this axis has this length. */
  target: z
    .object({ axis: z.enum(['x', 'y', 'z', 'longest']), lengthMm: z.number().gt(0).max(100_000) })
    .nullable()
    .default(null),
});
export type ModelScale = z.infer<typeof modelScale>;

type Size = readonly [number, number, number];

/** Millimetres per file unit, for a model of this size in file units. */
export function millimetresPerUnit(scale: ModelScale, fileSize: Size): number {
  if (scale.target) {
    const length =
      scale.target.axis === 'longest'
        ? Math.max(...fileSize)
        : fileSize[{ x: 0, y: 1, z: 2 }[scale.target.axis]];
    if (length !== undefined && length > 0) return scale.target.lengthMm / length;
  }
  if (scale.unit === 'mm') return 1;
  return scale.unit === 'inch' ? 25.4 : scale.factor;
}

/** A guess at the unit from the size alone, with its reason in words. Common practice, no source. */
export function guessUnit(fileSize: Size): { scale: ModelScale; reason: string } {
  const longest = Math.max(...fileSize);
  const shown = Number(longest.toPrecision(3));
  if (longest >= 40)
    return {
      scale: { unit: 'mm', factor: 1, target: null },
      reason: `The longest side is ${shown} in the file: plausible as millimetres.`,
    };
  if (longest >= 2)
    return {
      scale: { unit: 'inch', factor: 25.4, target: null },
      reason: `The longest side is ${shown} in the file: small for millimetres, plausible as inches.`,
    };
  return {
    scale: { unit: 'other', factor: 1000, target: null },
    reason: `The longest side is ${shown} in the file: plausible as metres.`,
  };
}
