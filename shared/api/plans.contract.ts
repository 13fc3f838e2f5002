import * as z from 'zod';
import { planOutput } from '../jobs/plan-make.js';
import { envelopeResponse } from './envelopes.contract.js';
import { recordId } from './ids.js';
import { jobResponse } from './jobs.contract.js';

export const planRequest = z.object({
  modelId: recordId,
  envelopeId: recordId,
  seed: z
    .number()
    .int()
    .min(0)
    .max(2 ** 31 - 1)
    .default(1),
});
export type PlanRequest = z.input<typeof planRequest>;

export const planSummary = z.object({
  id: recordId,
  modelId: recordId,
  modelName: z.string(),
  revisionNumber: z.number().int(),
  /** Counted per model, from 1. */
  number: z.number().int(),
  seed: z.number().int(),
  /** The envelope as it was when the plan was made. */
  envelope: envelopeResponse,
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  job: jobResponse,
  pieceCount: z.number().int().nullable(),
  allPassed: z.boolean().nullable(),
});
export type PlanSummary = z.infer<typeof planSummary>;
export const planListResponse = z.object({ plans: z.array(planSummary) });

/** A plan with its result; `result` is null until the job is done. Storage keys stay on the server. */
export const planResponse = planSummary.extend({
  result: planOutput.omit({ files: true }).extend({ archiveBytes: z.number() }).nullable(),
});
export type PlanResponse = z.infer<typeof planResponse>;
