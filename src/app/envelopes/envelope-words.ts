import { type EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import { writeSizeMm, writeLengthMm } from '../ui/format/quantities';

type Bed = Pick<EnvelopeResponse, 'marginMm'> &
  (
    | { readonly shape: 'rectangular'; readonly widthMm: number; readonly depthMm: number }
    | { readonly shape: 'round'; readonly diameterMm: number }
  );

/** The bed as it stands in a table. */
export function bedInWords(bed: Bed): string {
  return bed.shape === 'round'
    ? `⌀ ${writeLengthMm(bed.diameterMm)}`
    : writeSizeMm([bed.widthMm, bed.depthMm]);
}

/** The bed that is left inside the margin. */
export function usableBedInWords(bed: Bed): string {
  const off = 2 * bed.marginMm;
  return bed.shape === 'round'
    ? `⌀ ${writeLengthMm(bed.diameterMm - off)}`
    : writeSizeMm([bed.widthMm - off, bed.depthMm - off]);
}
