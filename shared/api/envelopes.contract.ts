import * as z from 'zod';
import { recordId } from './ids.js';

const lengthMm = (name: string) =>
  z
    .number({ error: `${name} must be a number of millimetres` })
    .gt(0, `${name} must be more than 0 mm`)
    .max(10_000, `${name} must be at most 10 000 mm`);

const common = {
  name: z.string().trim().min(1, 'Give the envelope a name').max(80),
  heightMm: lengthMm('Height'),
  marginMm: z.number().min(0, 'Margin cannot be negative').max(1_000),
  nozzleMm: z.number().gt(0).max(5),
  layerHeightMm: z.number().gt(0).max(5),
};

/** A rectangular build volume, terms after ISO/ASTM 52900. The margin stays free on every side of the bed. */
const rectangular = z.object({
  ...common,
  shape: z.literal('rectangular'),
  widthMm: lengthMm('Width'),
  depthMm: lengthMm('Depth'),
});

/** A cylindrical build volume. The margin stays free all round the bed. */
const round = z.object({ ...common, shape: z.literal('round'), diameterMm: lengthMm('Diameter') });

const leavesRoom = (envelope: z.infer<typeof rectangular> | z.infer<typeof round>) =>
  envelope.shape === 'round'
    ? envelope.diameterMm > 2 * envelope.marginMm
    : Math.min(envelope.widthMm, envelope.depthMm) > 2 * envelope.marginMm;

export const envelopeRequest = z
  .discriminatedUnion('shape', [rectangular, round])
  .refine(leavesRoom, { path: ['marginMm'], message: 'The margin leaves no room on the bed' })
  .refine((e) => e.layerHeightMm <= e.nozzleMm, {
    path: ['layerHeightMm'],
    message: 'Layers cannot be higher than the nozzle is wide',
  });
export type EnvelopeRequest = z.infer<typeof envelopeRequest>;

export const envelopeResponse = z.intersection(
  z.discriminatedUnion('shape', [rectangular, round]),
  z.object({ id: recordId, updatedAt: z.iso.datetime() }),
);
export type EnvelopeResponse = z.infer<typeof envelopeResponse>;
export const envelopeListResponse = z.object({ envelopes: z.array(envelopeResponse) });
