import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { type BuildSpace } from '../../../../shared/geometry/fitting/build-space.js';
import { type Triple } from '../scene/view-parts';
import { writeLengthMm } from '../../ui/format/quantities';

/** What an envelope leaves after its margin. The margin is kept round the bed, not above it. */
export function usableSpace(envelope: EnvelopeResponse): BuildSpace {
  const off = 2 * envelope.marginMm;
  return envelope.shape === 'round'
    ? {
        shape: 'round',
        diameterMm: envelope.diameterMm - off,
        heightMm: envelope.heightMm,
      }
    : {
        shape: 'rectangular',
        widthMm: envelope.widthMm - off,
        depthMm: envelope.depthMm - off,
        heightMm: envelope.heightMm,
      };
}

export interface UprightFit {
  readonly fits: boolean;
  /** What is too large by how much; empty when it fits. */
  readonly reason: string;
}

/**
 * Whether a box fits standing as it stands, turned by nothing or a quarter on the bed. A round bed
 * has to hold the box's four corners. What is in the box may still fit another way.
 */
export function fitsUpright(sizeMm: Triple, space: BuildSpace): UprightFit {
  const [x, y, z] = sizeMm;
  const overs: string[] = [];
  if (z > space.heightMm) overs.push(`${writeLengthMm(z - space.heightMm)} too tall`);
  if (space.shape === 'round') {
    const over = Math.hypot(x, y) - space.diameterMm;
    if (over > 0) overs.push(`${writeLengthMm(over)} too wide`);
  } else {
    const straight = Math.max(x - space.widthMm, y - space.depthMm);
    const turned = Math.max(y - space.widthMm, x - space.depthMm);
    const over = Math.min(straight, turned);
    if (over > 0) overs.push(`${writeLengthMm(over)} too long for the bed`);
  }
  return { fits: overs.length === 0, reason: overs.join(', ') };
}
