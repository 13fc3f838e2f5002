import * as z from 'zod';
import { vector3 } from './geometry-values.js';

/** How a seam is located and held. */
export const jointKinds = ['loose-pin', 'fixed-pin', 'stock-rod', 'backing-lip', 'none'] as const;
export const jointKind = z.enum(jointKinds);
export type JointKind = z.infer<typeof jointKind>;

/** Diameters that rods and pins are sold in, mm (ISO 2338, ISO 8734). */
export const pinDiametersMm = [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10, 12] as const;

/** What a person asks of a joint; null: as the walls allow. */
export const jointChoice = z.object({
  kind: jointKind.nullable().default(null),
  diameterMm: z.literal(pinDiametersMm).nullable().default(null),
  /** Into each side. */
  depthMm: z.number().min(1).max(100).nullable().default(null),
  /** At most so many in one seam. */
  most: z.number().int().min(1).max(8).nullable().default(null),
});
export type JointChoice = z.infer<typeof jointChoice>;

/** A seam by the two pieces and the cut, as the plan lists it. */
const seamName = z.object({
  between: z.tuple([z.string().max(12), z.string().max(12)]),
  cut: z.number().int().min(1),
});

export const jointWishes = z.object({
  usual: jointChoice.default(jointChoice.parse({})),
  /** Other choices for single seams. */
  seams: z
    .array(seamName.extend({ choice: jointChoice }))
    .max(2000)
    .default([]),
  /** Width and depth of the bevel along seams' edges, mm; 0 leaves them sharp. */
  edgeBevelMm: z.number().min(0).max(2).default(0.4),
  /** Engraved names and arrows on seam faces. */
  areMarked: z.boolean().default(true),
  /** Pieces whose openings get a wall that is cut out after printing, by name. */
  skins: z.array(z.string().max(12)).max(400).default([]),
  skinMm: z.number().min(0.2).max(3).default(0.6),
});
export type JointWishes = z.infer<typeof jointWishes>;

export const usualJoints: JointWishes = jointWishes.parse({});

/** Joints as every plan had them before they were made: none. */
export const noJoints: JointWishes = jointWishes.parse({
  usual: { kind: 'none' },
  edgeBevelMm: 0,
  areMarked: false,
});

/** One pin of a seam, or one lip, as it was made. */
export const fastenerSchema = z.object({
  /** Its middle in the plane of the seam, in the assembled model, mm. */
  at: vector3,
  /** Round finds the place, a slot lets the size be a little off along one line, loose only keeps order. */
  fit: z.enum(['round', 'slotted', 'loose']),
  diameterMm: z.number(),
  /** Into the first and the second piece of the seam, mm. */
  depthsMm: z.tuple([z.number(), z.number()]),
  /** Name of the part that goes in; null for a pin that is part of a piece. */
  part: z.string().nullable(),
});

export const jointSchema = z.object({
  kind: jointKind,
  /** One sentence from real numbers: why this kind. */
  reason: z.string(),
  fasteners: z.array(fastenerSchema),
  /** What could not be done and why. */
  notes: z.array(z.string()),
});
export type Joint = z.infer<typeof jointSchema>;

/** Things beside the pieces: printed pins and lips, stock rods. */
export const partSchema = z.object({
  /** `pin-5x18`, `rod-1x9`, `lip-01`. */
  name: z.string(),
  kind: z.enum(['pin', 'rod', 'lip']),
  count: z.number().int(),
  diameterMm: z.number(),
  lengthMm: z.number(),
  volumeMm3: z.number(),
  /** Name inside the ZIP; null for what is cut from stock. */
  file: z.string().nullable(),
});
export type PlanPart = z.infer<typeof partSchema>;
