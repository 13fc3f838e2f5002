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

/** A unit that a workshop uses for files that state none. */
export const usualUnit = modelScale.pick({ unit: true, factor: true });
export type UsualUnit = z.infer<typeof usualUnit>;

/** Longest sides that are plausible for something too large for a printer, mm. Common practice, no source. */
const plausibleMm = { least: 20, most: 10_000 };

/**
 * The scale of a file about which nobody decided: the unit that the file states; else the one that the
 * workshop chose last, when it gives a plausible size; else a guess from the size. With its reason.
 */
export function firstScale(
  fileSize: Size,
  fileUnit: { readonly name: string; readonly millimetres: number } | null,
  usual: UsualUnit | null,
): { scale: ModelScale; reason: string } {
  if (fileUnit)
    return {
      scale: scaleOfFactor(fileUnit.millimetres),
      reason: `The file states its unit: ${fileUnit.name}.`,
    };
  if (usual) {
    const scale: ModelScale = { ...usual, target: null };
    const longestMm = Math.max(...fileSize) * millimetresPerUnit(scale, fileSize);
    if (longestMm >= plausibleMm.least && longestMm <= plausibleMm.most)
      return { scale, reason: `Your workshop last chose ${nameOfUnit(usual)}.` };
  }
  return guessUnit(fileSize);
}

function scaleOfFactor(millimetres: number): ModelScale {
  if (millimetres === 1) return { unit: 'mm', factor: 1, target: null };
  if (millimetres === 25.4) return { unit: 'inch', factor: 25.4, target: null };
  return { unit: 'other', factor: millimetres, target: null };
}

function nameOfUnit({ unit, factor }: UsualUnit): string {
  if (unit === 'mm') return 'millimetres';
  return unit === 'inch' ? 'inches' : `${factor} mm for a unit of the file`;
}
