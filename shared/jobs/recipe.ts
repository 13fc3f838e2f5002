import * as z from 'zod';
import { planeSchema, vector3 } from './geometry-values.js';
import { jointWishes, noJoints } from './joint-plan.js';
import { materialProfile, usualMaterial } from './material-profile.js';
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

/** How a person wants a piece to lie. */
export const orientationWish = z.object({
  piece: z.string().max(12),
  /** Unit resting direction: it points at the bed, in the frame of the scaled model. */
  down: vector3.refine(
    ([x, y, z]) => Math.abs(Math.hypot(x, y, z) - 1) < 1e-6,
    'A direction has length 1',
  ),
});
export type OrientationWish = z.infer<typeof orientationWish>;

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
  /** Plans of before had no joints. */
  joints: jointWishes.default(noJoints),
  material: materialProfile.default(usualMaterial),
  orientations: z.array(orientationWish).max(400).default([]),
  tree: cutTreeSchema,
});
export type Recipe = z.infer<typeof recipeSchema>;
