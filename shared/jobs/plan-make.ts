import * as z from 'zod';
import { vector3 } from './geometry-values.js';
import { planWishes, usualWishes } from './plan-wishes.js';
import { jointSchema, jointWishes, partSchema, usualJoints } from './joint-plan.js';
import { materialProfile, usualMaterial } from './material-profile.js';
import { buildSpaceSchema, cutTreeSchema, orientationWish, recipeSchema } from './recipe.js';

export const planInput = z.object({
  solidKey: z.string(),
  modelName: z.string(),
  millimetresPerUnit: z.number().positive(),
  space: buildSpaceSchema,
  otherSpaces: z.array(buildSpaceSchema).max(7).default([]),
  wishes: planWishes.default(usualWishes),
  /** A tree that was found before: its pieces are made, nothing is searched. */
  tree: cutTreeSchema.nullable().default(null),
  joints: jointWishes.default(usualJoints),
  material: materialProfile.default(usualMaterial),
  /** By the names that the pieces of this very tree have. */
  orientations: z.array(orientationWish).max(400).default([]),
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

/** A low and a high end: estimates without a tool path are rarely better than ten per cent. */
export const rangeSchema = z.tuple([z.number(), z.number()]);
export type Range = z.infer<typeof rangeSchema>;

/** How a piece lies, or could lie, to be printed. */
export const orientationSchema = z.object({
  /** Points at the bed, in the assembled model. */
  down: vector3,
  space: z.number().int().min(0),
  supportMm3: z.number(),
  /** What the support holds up, seen from above, mm². */
  supportMm2: z.number(),
  heightMm: z.number(),
  /** Flat on the bed, mm². */
  contactMm2: z.number(),
  /**
   * Height of the centre of mass over its least distance from the edge of the foot; null when it
   * would fall over.
   */
  tipping: z.number().nullable(),
  /** Faces that support leans on, those in show counted more, mm². */
  scarMm2: z.number(),
});
export type PieceOrientation = z.infer<typeof orientationSchema>;

export const estimateSchema = z.object({
  /** Piece and support together. */
  massG: rangeSchema,
  filamentM: rangeSchema,
  hours: rangeSchema,
  /** Of the material, in the workshop's currency. */
  cost: rangeSchema,
});
export type Estimate = z.infer<typeof estimateSchema>;

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
  /** The one that is used, then others nearly as good; empty for plans of before. */
  orientations: z.array(orientationSchema).default([]),
  estimate: estimateSchema.nullable().default(null),
  /** What could not be done and why; skins to be cut out after printing. */
  notes: z.array(z.string()).default([]),
  /** Openings in thin walls that a skin could close, so that they need no support. */
  openings: z.number().int().default(0),
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
  joint: jointSchema.nullable().default(null),
  /** To be mixed, squeeze-out included. */
  glueMl: rangeSchema.default([0, 0]),
});

/** One move of the glue-up. */
export const assemblyStepSchema = z.object({
  /** Pieces that move, and those that they are joined to. */
  moved: z.array(z.string()),
  onto: z.array(z.string()),
  /** Direction of the move, unit, assembled model. */
  direction: vector3,
  /** Seams (numbers in the plan's list, from 0) that are closed by it. */
  seams: z.array(z.number().int()),
  glueMl: rangeSchema,
  /** Mixes of glue, each used up within its pot life. */
  mixes: z.number().int(),
  movedMassG: rangeSchema,
});
export type AssemblyStep = z.infer<typeof assemblyStepSchema>;

export const totalsSchema = z.object({
  estimate: estimateSchema,
  glueMl: rangeSchema,
  mixes: z.number().int(),
  /** Of the finished object: pieces, pins, lips and glue, no support. */
  assembledG: rangeSchema,
});
export type PlanTotals = z.infer<typeof totalsSchema>;

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
  /** Pins, rods and lips; empty for plans of before. */
  parts: z.array(partSchema).default([]),
  assembly: z.array(assemblyStepSchema).default([]),
  totals: totalsSchema.nullable().default(null),
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
