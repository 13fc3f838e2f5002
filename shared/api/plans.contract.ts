import * as z from 'zod';
import { objectivesSchema, planOutput } from '../jobs/plan-make.js';
import { jointWishes } from '../jobs/joint-plan.js';
import { planWishes } from '../jobs/plan-wishes.js';
import { orientationWish } from '../jobs/recipe.js';
import { envelopeResponse } from './envelopes.contract.js';
import { recordId } from './ids.js';
import { jobResponse } from './jobs.contract.js';

const planOrder = z.object({
  modelId: recordId,
  /** Pieces go to this envelope when it holds them; only an offer brings its own. */
  envelopeId: recordId.optional(),
  /** Further envelopes, for pieces that the ones before do not hold. */
  otherEnvelopeIds: z.array(recordId).max(7).default([]),
  wishes: planWishes.optional(),
  /**
   * Another plan that the same search found: its cuts are made as they are, with the envelopes,
   * wishes and seed of that plan.
   */
  fromOffer: z.object({ planId: recordId, offer: z.number().int().min(0).max(99) }).optional(),
  /** What is printed and glued with; absent: PLA and five-minute epoxy as they usually are. */
  materialId: recordId.optional(),
  /** Joints as the walls allow unless asked for otherwise. */
  joints: jointWishes.optional(),
  /**
   * A plan that was made: its cuts are made again as they are, with its envelopes, wishes, material
   * and seed, and what is given here instead of its own.
   */
  fromPlan: z
    .object({
      planId: recordId,
      joints: jointWishes.optional(),
      orientations: z.array(orientationWish).max(400).optional(),
    })
    .optional(),
  seed: z
    .number()
    .int()
    .min(0)
    .max(2 ** 31 - 1)
    .default(1),
});
export const planRequest = planOrder.refine(
  (order) =>
    order.envelopeId !== undefined || order.fromOffer !== undefined || order.fromPlan !== undefined,
  { path: ['envelopeId'], message: 'Choose an envelope' },
);
export type PlanRequest = z.input<typeof planRequest>;

/** A person's word that a plan with a failed check may be downloaded all the same. */
export const planReleaseRequest = z.object({
  reason: z.string().trim().min(3, 'Say why, in a few words').max(300),
});
export const planRelease = z.object({
  reason: z.string(),
  by: z.string(),
  at: z.iso.datetime(),
});
export type PlanRelease = z.infer<typeof planRelease>;

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
  otherEnvelopes: z.array(envelopeResponse),
  wishes: planWishes,
  /** Number of the plan among whose offers this was found; null for a plan that was searched. */
  fromPlan: z.number().int().nullable(),
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  job: jobResponse,
  pieceCount: z.number().int().nullable(),
  allPassed: z.boolean().nullable(),
  /** Null unless the proof failed and someone wanted the files all the same. */
  release: planRelease.nullable(),
  /** What the plans of a model are compared by; null until made, and for plans of before. */
  objectives: objectivesSchema.nullable(),
});
export type PlanSummary = z.infer<typeof planSummary>;
export const planListResponse = z.object({ plans: z.array(planSummary) });

/** A plan with its result; `result` is null until the job is done. Storage keys stay on the server. */
export const planResponse = planSummary.extend({
  result: planOutput.omit({ files: true }).extend({ archiveBytes: z.number() }).nullable(),
});
export type PlanResponse = z.infer<typeof planResponse>;
