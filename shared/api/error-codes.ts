import * as z from 'zod';

/** Every code the server answers with; a client switches on these, never on the message. */
export const errorCodes = [
  'request.invalid',
  'request.tooLarge',
  'request.tooMany',
  'request.notFound',
  'request.forged',
  'session.required',
  'session.wrongCredentials',
  'session.forbidden',
  'model.notFound',
  'model.notReady',
  'model.notPlannable',
  'model.inUse',
  'envelope.notFound',
  'envelope.nameTaken',
  'material.notFound',
  'material.nameTaken',
  'material.changed',
  'plan.notFound',
  'plan.notReady',
  'plan.offerNotFound',
  'plan.offerOutdated',
  'plan.proofFailed',
  'job.notFound',
  'server.failed',
] as const;
export type ErrorCode = (typeof errorCodes)[number];

/** The one shape in which every refusal leaves the server. */
export const errorResponse = z.object({
  error: z.object({
    code: z.enum(errorCodes),
    message: z.string(),
    details: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  }),
});
export type ErrorResponse = z.infer<typeof errorResponse>;
