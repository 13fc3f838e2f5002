import * as z from 'zod';
import { buildSpaceSchema, recipeSchema, vector3 } from './recipe.js';

export const planInput = z.object({
  solidKey: z.string(),
  modelName: z.string(),
  millimetresPerUnit: z.number().positive(),
  space: buildSpaceSchema,
  seed: z.number().int().min(0),
  outputPrefix: z.string(),
});

export const pieceSchema = z.object({
  /** Item number of the parts list, from 1. */
  item: z.number().int(),
  /** `P01`, `P02` … */
  name: z.string(),
  triangles: z.number(),
  volumeMm3: z.number(),
  /** Size of the bounding box as laid on the bed. */
  sizeMm: vector3,
  fits: z.boolean(),
  /** Name inside the ZIP. */
  file: z.string(),
  /** Rigid motion from the assembled model to the bed: 12 numbers, rows of a 3×4 matrix. */
  placement: z.array(z.number()).length(12),
  /** Centre of the piece's box in the assembled model, mm. */
  centreMm: vector3,
});

export const seamSchema = z.object({
  /** Names of the two pieces that meet. */
  between: z.tuple([z.string(), z.string()]),
  areaMm2: z.number(),
  /** Index of the cut in the tree, counted from the root, above before below, from 1. */
  cut: z.number().int(),
});

export const proofSchema = z.object({
  /** What is checked, in words a maker understands. */
  check: z.string(),
  measured: z.string(),
  limit: z.string(),
  passed: z.boolean(),
});

export const timingsSchema = z.object({
  parse: z.number(),
  weld: z.number(),
  inspect: z.number(),
  plan: z.number(),
  cut: z.number(),
  write: z.number(),
});

export const planOutput = z.object({
  recipe: recipeSchema,
  pieces: z.array(pieceSchema),
  seams: z.array(seamSchema),
  bounds: z.object({
    /** No plan whatever can have fewer pieces. */
    pieces: z.number().int(),
    reason: z.string(),
    /** Pieces of the best axis grid after its exact cut, for comparison. */
    gridPieces: z.number().int(),
  }),
  proof: z.array(proofSchema),
  timingsMs: timingsSchema,
  files: z.object({
    /** GLB: one mesh `P01` … a piece, one line set `seam-1` … a seam, all in the assembled frame, mm. */
    view: z.string(),
    /** Everything that belongs in the ZIP. */
    archive: z.array(z.object({ name: z.string(), key: z.string(), bytes: z.number() })),
  }),
});
export type PlanOutput = z.infer<typeof planOutput>;
export type Piece = z.infer<typeof pieceSchema>;
export type Seam = z.infer<typeof seamSchema>;
export type ProofRow = z.infer<typeof proofSchema>;
