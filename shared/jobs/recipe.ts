import * as z from 'zod';
import { planeSchema } from './geometry-values.js';
import { planWishes, usualWishes } from './plan-wishes.js';

/** A tree of planar cuts. A leaf is a part; a part that falls into loose bodies becomes several pieces. */
export type CutTree =
  | { kind: 'leaf' }
  | {
      kind: 'cut';
      plane: z.infer<typeof planeSchema>;
      /** One sentence made from real numbers: why this cut is here. */
      reason: string;
      /** The person's own plane: it stays exactly where it was put. */
      locked?: boolean | undefined;
      above: CutTree;
      below: CutTree;
    };
export const cutTreeSchema: z.ZodType<CutTree> = z.lazy(() =>
  z.discriminatedUnion('kind', [
    z.object({ kind: z.literal('leaf') }),
    z.object({
      kind: z.literal('cut'),
      plane: planeSchema,
      reason: z.string(),
      locked: z.boolean().optional(),
      above: cutTreeSchema,
      below: cutTreeSchema,
    }),
  ]),
);

/** The usable build volume with the margin already taken off, mm. */
export const buildSpaceSchema = z.discriminatedUnion('shape', [
  z.object({
    shape: z.literal('rectangular'),
    widthMm: z.number().positive(),
    depthMm: z.number().positive(),
    heightMm: z.number().positive(),
  }),
  z.object({
    shape: z.literal('round'),
    diameterMm: z.number().positive(),
    heightMm: z.number().positive(),
  }),
]);

/** A plan as pure data: building it twice gives the same bytes. */
export const recipeSchema = z.object({
  version: z.literal(1),
  seed: z.number().int().min(0),
  millimetresPerUnit: z.number().positive(),
  /** The envelope that pieces go to when it holds them. */
  space: buildSpaceSchema,
  /** Further envelopes, for pieces that the ones before do not hold. */
  otherSpaces: z.array(buildSpaceSchema).max(7).default([]),
  wishes: planWishes.default(usualWishes),
  tree: cutTreeSchema,
});
export type Recipe = z.infer<typeof recipeSchema>;
