import * as z from 'zod';

/** A low and a high end; low ≤ high. */
const range = (least: number, most: number) =>
  z
    .tuple([z.number().min(least).max(most), z.number().min(least).max(most)])
    .refine(([low, high]) => low <= high, 'The first number must not exceed the second');

/**
 * Diametral clearances (hole minus pin, never per side), mm; the usual values are for a 0.4 mm
 * nozzle (common practice, no source).
 */
export const clearancesSchema = z.object({
  /** Holds by friction. */
  pressMm: z.number().min(-0.3).max(0.3).default(-0.03),
  /** Finds its place without play. */
  locatingMm: z.number().min(0).max(0.6).default(0.15),
  /** Slides. */
  slidingMm: z.number().min(0.1).max(1).default(0.35),
  /** Only keeps two pieces from being confused. */
  looseMm: z.number().min(0.2).max(3).default(0.5),
});

/** What seams are glued with. */
export const glueSchema = z.object({
  name: z.string().trim().min(1).max(60).default('Five-minute epoxy'),
  /** Best at about 0.1 to 0.2 mm (guideline of the adhesives industry, from a secondary copy). */
  filmMm: z.number().min(0.02).max(1).default(0.15),
  potLifeMinutes: z.number().min(1).max(240).default(5),
  /** From mixing to letting go, minutes. */
  holdMinutes: z.number().min(1).max(2880).default(15),
  densityGPerMl: z.number().min(0.5).max(3).default(1.15),
  /** How much more than the film is mixed: squeeze-out (common practice, no source). */
  allowance: range(1, 4).default([1.3, 2]),
  /** Joined area that one person coats and closes in a minute, cm² (common practice, no source). */
  coatedCm2PerMinute: z.number().min(1).max(1000).default(20),
});

/** What a workshop prints and glues with; a plan keeps a copy of the one it used. */
export const materialProfile = z.object({
  name: z.string().trim().min(1).max(60).default('PLA'),
  densityGPerCm3: z.number().min(0.3).max(9).default(1.24),
  /** In the workshop's own currency. */
  pricePerKg: z.number().min(0).max(100_000).default(22),
  filamentMm: z.number().min(1).max(4).default(1.75),
  /** Faces that lean further than this from the vertical need support, degrees. */
  overhangDegrees: z.number().min(10).max(85).default(45),
  /** Level faces between two walls no farther apart than this need none, mm. */
  bridgeMm: z.number().min(0).max(100).default(5),
  /** Linear; pieces become this much smaller while they cool. */
  shrinkagePercent: z.number().min(0).max(5).default(0.4),
  /** Whether the exported pieces are made larger by as much. */
  isShrinkageApplied: z.boolean().default(false),
  clearances: clearancesSchema.default(clearancesSchema.parse({})),
  lineWidthMm: z.number().min(0.1).max(3).default(0.4),
  layerHeightMm: z.number().min(0.02).max(2).default(0.2),
  /** Lines side by side in a wall. */
  walls: z.number().int().min(1).max(20).default(3),
  infillPercent: z.number().min(0).max(100).default(15),
  /** Volume that the nozzle lays down at its best, mm³/s (from memory). */
  flowMm3PerS: range(0.1, 200).default([8, 15]),
  /** Share of that over a whole print (from memory). */
  flowShare: range(0.05, 1).default([0.5, 0.7]),
  /** Of the columns under overhangs, how much is really filled (common practice, no source). */
  supportFillPercent: z.number().min(1).max(100).default(20),
  glue: glueSchema.default(glueSchema.parse({})),
});
export type MaterialProfile = z.infer<typeof materialProfile>;

export const usualMaterial: MaterialProfile = materialProfile.parse({});

/**
 * Materials to begin with. Densities and shrinkages are the middle of the usual ranges;
 * ASA, TPU and PA12 from memory. Prices are invented.
 */
export const materialPresets: readonly MaterialProfile[] = [
  { name: 'PLA', densityGPerCm3: 1.24, shrinkagePercent: 0.4, pricePerKg: 22 },
  { name: 'PETG', densityGPerCm3: 1.27, shrinkagePercent: 0.6, pricePerKg: 24 },
  { name: 'ABS', densityGPerCm3: 1.04, shrinkagePercent: 1.1, pricePerKg: 23 },
  { name: 'ASA', densityGPerCm3: 1.07, shrinkagePercent: 0.5, pricePerKg: 29 },
  { name: 'TPU 95A', densityGPerCm3: 1.21, shrinkagePercent: 0.5, pricePerKg: 35 },
  { name: 'PA12', densityGPerCm3: 1.01, shrinkagePercent: 1.3, pricePerKg: 60 },
].map((given) => materialProfile.parse(given));
