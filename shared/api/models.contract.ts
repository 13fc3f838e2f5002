import * as z from 'zod';
import { mendingChoices } from '../jobs/mending-choices.js';
import { meshReport } from '../jobs/model-inspect.js';
import { recordId } from './ids.js';
import { jobResponse } from './jobs.contract.js';
import { modelScale } from './model-scale.js';

export const modelPatchRequest = z.object({
  name: z.string().trim().min(1).max(120).optional(),
  scale: modelScale.optional(),
  /** Takes the solid that mending made, although it differs from the file. */
  accept: z.literal(true).optional(),
});
export type ModelPatchRequest = z.infer<typeof modelPatchRequest>;

/** Inspects the newest revision again with other choices. */
export const mendRequest = z.object({ choices: mendingChoices });
export type MendRequest = z.infer<typeof mendRequest>;

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
    createdAt: z.iso.datetime(),
    /** Null until inspected. */
    report: meshReport.nullable(),
    /** What was decided about the file; the report's own choices lag behind while a job runs. */
    choices: mendingChoices,
    /** Whether a person accepted what mending changed. */
    isAccepted: z.boolean(),
    /** Whether a plan can be made of it now. */
    isPlannable: z.boolean(),
    /** Whether a person chose the scale; until then it is a guess with `scaleReason`. */
    scaleConfirmed: z.boolean(),
    scale: modelScale,
    scaleReason: z.string(),
    /** Millimetres per file unit; null until inspected. */
    millimetresPerUnit: z.number().nullable(),
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

/** One revision of a model, for the list that compares them. Measures after scaling, null until inspected. */
export const revisionSummary = z.object({
  id: recordId,
  number: z.number().int(),
  fileName: z.string(),
  fileBytes: z.number(),
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  triangles: z.number().nullable(),
  sizeMm: z.tuple([z.number(), z.number(), z.number()]).nullable(),
  volumeMm3: z.number().nullable(),
  planCount: z.number().int(),
});
export type RevisionSummary = z.infer<typeof revisionSummary>;
/** The newest first. */
export const revisionListResponse = z.object({ revisions: z.array(revisionSummary) });

/** Largest file accepted, bytes: 512 MB. */
export const maxModelBytes = 512 * 1024 * 1024;
