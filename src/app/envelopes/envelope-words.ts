import { type EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import { writeGivenMm } from '../ui/format/quantities';

type Bed = Pick<EnvelopeResponse, 'marginMm'> &
  (
    | { readonly shape: 'rectangular'; readonly widthMm: number; readonly depthMm: number }
    | { readonly shape: 'round'; readonly diameterMm: number }
  );

/** The bed as it stands in a table. */
export function bedInWords(bed: Bed): string {
  return bed.shape === 'round'
    ? `⌀ ${writeGivenMm(bed.diameterMm)}`
    : writeGivenMm(bed.widthMm, bed.depthMm);
}

/** The bed that is left inside the margin. */
export function usableBedInWords(bed: Bed): string {
  const off = 2 * bed.marginMm;
  return bed.shape === 'round'
    ? `⌀ ${writeGivenMm(bed.diameterMm - off)}`
    : writeGivenMm(bed.widthMm - off, bed.depthMm - off);
}

/** Everything about an envelope, for those who only read it. */
export function envelopeFacts(
  envelope: EnvelopeResponse,
): readonly { name: string; value: string }[] {
  const { heightMm, marginMm, nozzleMm, layerHeightMm } = envelope;
  return [
    { name: 'Bed', value: bedInWords(envelope) },
    { name: 'Margin on every side', value: writeGivenMm(marginMm) },
    { name: 'Usable bed', value: usableBedInWords(envelope) },
    { name: 'Height', value: writeGivenMm(heightMm) },
    { name: 'Nozzle', value: writeGivenMm(nozzleMm) },
    { name: 'Layer height', value: writeGivenMm(layerHeightMm) },
  ];
}
