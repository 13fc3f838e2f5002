import * as z from 'zod';
import { vector3 } from './geometry-values.js';
import { planWishes, usualWishes } from './plan-wishes.js';
import { buildSpaceSchema, cutTreeSchema, recipeSchema } from './recipe.js';

export const planInput = z.object({
  solidKey: z.string(),
  modelName: z.string(),
  millimetresPerUnit: z.number().positive(),
  space: buildSpaceSchema,
  otherSpaces: z.array(buildSpaceSchema).max(7).default([]),
  wishes: planWishes.default(usualWishes),
  /** A tree that was found before: its pieces are made, nothing is searched. */
  tree: cutTreeSchema.nullable().default(null),
  seed: z.number().int().min(0),
  outputPrefix: z.string(),
});

/** What plans are compared by; the first three count against a plan. */
export const objectivesSchema = z.object({
  pieces: z.number().int(),
  /** Columns under all that leans too far, each piece in its own best orientation, mm³. */
  supportMm3: z.number(),
  /** Length of all seams on the surface, each stretch counted by how exposed it is, mm. */
  visibleSeamMm: z.number(),
  /**
   * Bending stress of the most strained seam under the weight of the lighter side held out level,
   * kPa; a planning figure for comparing, never a promise.
   */
  weakestSeamKpa: z.number(),
});
export type Objectives = z.infer<typeof objectivesSchema>;

/** A plan that the search found, cut on the exact model. */
export const offerSchema = z.object({
  /** What it is best at among the offers, in words: `fewest pieces`, … */
  bestAt: z.array(z.string()),
  objectives: objectivesSchema,
  tree: cutTreeSchema,
});
export type Offer = z.infer<typeof offerSchema>;

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
  /** Which envelope it goes to: 0 is the plan's first. */
  space: z.number().int().min(0).default(0),
  /** In this orientation, mm³; a planning figure. */
  supportMm3: z.number().default(0),
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
  /** Counted by how exposed the surface is, mm. */
  visibleMm: z.number().default(0),
  /** See the objectives, kPa. */
  bendingKpa: z.number().default(0),
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
    /** How far the plan may be from the fewest possible, in words. */
    gap: z.string().default(''),
    /** Pieces of the best axis grid after its exact cut, for comparison. */
    gridPieces: z.number().int(),
  }),
  /** Of this plan; null for plans made before they were measured. */
  objectives: objectivesSchema.nullable().default(null),
  /** The plans of which none is better than another in everything; this one is among them. */
  offers: z.array(offerSchema).default([]),
  /** Which of the offers this is; null when the tree was given. */
  chosenOffer: z.number().int().nullable().default(null),
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
