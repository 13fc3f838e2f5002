import * as z from 'zod';
import { meshReport } from '../jobs/model-inspect.js';
import { recordId } from './ids.js';
import { jobResponse } from './jobs.contract.js';
import { modelScale } from './model-scale.js';

export const modelPatchRequest = z.object({
  name: z.string().trim().min(1).max(120).optional(),
  scale: modelScale.optional(),
});
export type ModelPatchRequest = z.infer<typeof modelPatchRequest>;

export const modelResponse = z.object({
  id: recordId,
  name: z.string(),
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  revision: z.object({
    id: recordId,
    number: z.number().int(),
    fileName: z.string(),
    fileBytes: z.number(),
    /** Null until inspected. */
    report: meshReport.nullable(),
    /** Whether a person chose the scale; until then it is a guess with `scaleReason`. */
    scaleConfirmed: z.boolean(),
    scale: modelScale,
    scaleReason: z.string(),
    /** Size, volume and area after scaling; null until inspected. */
    sizeMm: z.tuple([z.number(), z.number(), z.number()]).nullable(),
    volumeMm3: z.number().nullable(),
    areaMm2: z.number().nullable(),
    hasThumbnail: z.boolean(),
    hasView: z.boolean(),
    viewTriangles: z.number(),
    /** The job that inspects it. */
    job: jobResponse,
  }),
  planCount: z.number().int(),
});
export type ModelResponse = z.infer<typeof modelResponse>;
export const modelListResponse = z.object({ models: z.array(modelResponse) });

/** Largest file accepted, bytes: 512 MB. */
export const maxModelBytes = 512 * 1024 * 1024;
