import type { EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import type { Envelope } from './envelopes.model.js';

export function toEnvelopeResponse(envelope: Envelope): EnvelopeResponse {
  return { ...envelope, updatedAt: envelope.updatedAt.toISOString() };
}
