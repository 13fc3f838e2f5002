import * as z from 'zod';

/** Millimetres, right-handed, z up, in the frame of the scaled model. */
export const vector3 = z.tuple([z.number(), z.number(), z.number()]);

/** Points p with normal·p = offset; the side with normal·p ≥ offset is above. Normals have length 1. */
export const planeSchema = z.object({ normal: vector3, offset: z.number() });

/** A tree of planar cuts. A leaf is a part; a part that falls into loose bodies becomes several pieces. */
export type CutTree =
  | { kind: 'leaf' }
  | {
      kind: 'cut';
      plane: z.infer<typeof planeSchema>;
      /** One sentence made from real numbers: why this cut is here. */
      reason: string;
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
  space: buildSpaceSchema,
  tree: cutTreeSchema,
});
export type Recipe = z.infer<typeof recipeSchema>;
