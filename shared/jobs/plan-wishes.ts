import * as z from 'zod';
import { planeSchema, vector3 } from './geometry-values.js';

const zoneName = z.string().trim().min(1).max(80);
const coordinate = z.number().min(-1e6).max(1e6);
const point = z.tuple([coordinate, coordinate, coordinate]);

/** A region of the object, mm, in the frame of the scaled model. */
export const zoneSchema = z.discriminatedUnion('shape', [
  z.object({ shape: z.literal('box'), name: zoneName, min: point, max: point }),
  z.object({
    shape: z.literal('sphere'),
    name: zoneName,
    centre: point,
    radiusMm: z.number().gt(0).max(1e6),
  }),
  z.object({
    shape: z.literal('facets'),
    name: zoneName,
    /** Numbers of the solid's triangles. */
    facets: z.array(z.number().int().min(0)).min(1).max(200_000),
  }),
]);
export type Zone = z.infer<typeof zoneSchema>;

/** How much something matters to the person: 0 not at all, 1 as much as it can. */
const share = z.number().min(0).max(1);

export const preferencesSchema = z.object({
  /** Every piece costs handling and a seam. */
  fewPieces: share,
  /** Support costs material, time and the surface under it. */
  littleSupport: share,
  /** Seams in sight have to be filled and sanded. */
  hiddenSeams: share,
  /** A seam carries what is glued on beyond it. */
  sturdySeams: share,
});
export type Preferences = z.infer<typeof preferencesSchema>;

/** What a person asks of a plan; stored in its recipe. */
export const planWishes = z.object({
  preferences: preferencesSchema.default({
    fewPieces: 0.75,
    littleSupport: 0.75,
    hiddenSeams: 0.5,
    sturdySeams: 0.3,
  }),
  /** From the object to where it is looked at from; none: all sides count alike. */
  showDirections: z.array(vector3).max(12).default([]),
  /** Regions in which a seam costs more. */
  showZones: z.array(zoneSchema).max(50).default([]),
  /** Regions that no seam may cross. */
  keepWhole: z.array(zoneSchema).max(50).default([]),
  /** The person's own planes, made first, in this order, through all that they meet. */
  lockedCuts: z.array(planeSchema).max(60).default([]),
  /** Faces that lean further than this from the vertical need support, degrees. */
  overhangDegrees: z.number().min(10).max(85).default(45),
  /** No piece shall be thinner than this across its cut, mm. */
  leastPieceMm: z.number().min(0).max(200).default(12),
});
export type PlanWishes = z.infer<typeof planWishes>;

/** Nothing asked for: the usual preferences. */
export const usualWishes: PlanWishes = planWishes.parse({});

/** Starting points for the preferences. */
export const preferencePresets = [
  { id: 'even', name: 'A bit of everything', preferences: usualWishes.preferences },
  {
    id: 'quick',
    name: 'Fewest pieces',
    preferences: { fewPieces: 1, littleSupport: 0.1, hiddenSeams: 0.1, sturdySeams: 0.1 },
  },
  {
    id: 'clean',
    name: 'Clean printing',
    preferences: { fewPieces: 0.4, littleSupport: 1, hiddenSeams: 0.2, sturdySeams: 0.2 },
  },
  {
    id: 'fair',
    name: 'Fair face',
    preferences: { fewPieces: 0.4, littleSupport: 0.2, hiddenSeams: 1, sturdySeams: 0.2 },
  },
  {
    id: 'stout',
    name: 'Stout seams',
    preferences: { fewPieces: 0.5, littleSupport: 0.2, hiddenSeams: 0.2, sturdySeams: 1 },
  },
] as const satisfies readonly { id: string; name: string; preferences: Preferences }[];
