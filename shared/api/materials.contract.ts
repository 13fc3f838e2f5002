import * as z from 'zod';
import { materialProfile } from '../jobs/material-profile.js';
import { recordId } from './ids.js';

export const materialRequest = z.object({
  profile: materialProfile,
  /** The version that was read; another one meanwhile is not written over. Absent: whatever it is. */
  version: z.number().int().min(1).optional(),
});
export type MaterialRequest = z.input<typeof materialRequest>;

export const materialResponse = z.object({
  id: recordId,
  profile: materialProfile,
  /** Counted up by every change. */
  version: z.number().int(),
  updatedAt: z.iso.datetime(),
});
export type MaterialResponse = z.infer<typeof materialResponse>;
export const materialListResponse = z.object({ materials: z.array(materialResponse) });
