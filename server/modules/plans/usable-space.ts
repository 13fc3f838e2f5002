import type { EnvelopeData } from '../envelopes/envelopes.model.js';

/** The build volume with the margin taken off every side of the bed. The height is all usable. */
export function usableSpace(envelope: EnvelopeData) {
  const { heightMm, marginMm } = envelope;
  return envelope.shape === 'round'
    ? ({ shape: 'round', diameterMm: envelope.diameterMm - 2 * marginMm, heightMm } as const)
    : ({
        shape: 'rectangular',
        widthMm: envelope.widthMm - 2 * marginMm,
        depthMm: envelope.depthMm - 2 * marginMm,
        heightMm,
      } as const);
}
