import * as z from 'zod';

/** Millimetres, right-handed, z up, in the frame of the scaled model. */
export const vector3 = z.tuple([z.number(), z.number(), z.number()]);

/** Points p with normal·p = offset; the side with normal·p ≥ offset is above. Normals have length 1. */
export const planeSchema = z.object({ normal: vector3, offset: z.number() });
