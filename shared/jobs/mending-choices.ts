import * as z from 'zod';

/** Cells along the longest side of a re-mesh: fewest, most, and what is offered first. */
export const fewestRemeshCells = 50;
export const mostRemeshCells = 800;
export const usualRemeshCells = 400;

/**
 * What a person decided about a file. File and choices together give the solid: the same ones give
 * the same solid again. Lengths in file units.
 */
export const mendingChoices = z.object({
  /** Numbers of the parts to take, as the report lists them; null takes all. */
  parts: z.array(z.number().int().min(0)).min(1).max(10_000).nullable().default(null),
  /** Holes with a rim of at most this length are filled; null fills pinholes only. */
  fillHolesUpTo: z.number().gt(0).max(1e9).nullable().default(null),
  /** Cells along the longest side when the surface is to be rebuilt on a grid; null leaves it. */
  remeshCells: z
    .number()
    .int()
    .min(fewestRemeshCells)
    .max(mostRemeshCells)
    .nullable()
    .default(null),
});
export type MendingChoices = z.infer<typeof mendingChoices>;

/** Nothing decided yet. */
export const noChoices: MendingChoices = { parts: null, fillHolesUpTo: null, remeshCells: null };
