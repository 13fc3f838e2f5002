import type { JobRefusal } from '../runtime/job-refusal.js';
import { countOf, refuseFile } from './refusal-words.js';

/**
 * Largest coordinate accepted, in file units: 10 km in millimetres. Beyond it a float32 steps by
 * whole units, so nothing that is printed is described any more.
 */
export const largestCoordinate = 1e7;

/** Why a file with such coordinates is refused; `firstFacet` counts from 1. */
export function refuseCoordinates(
  fileName: string,
  found: { notNumbers: number; tooLarge: number; firstFacet: number },
): JobRefusal {
  const where = `first in facet ${found.firstFacet}`;
  if (found.notNumbers > 0)
    return refuseFile(
      fileName,
      `holds ${countOf(found.notNumbers, 'coordinate')} that ${found.notNumbers === 1 ? 'is' : 'are'} not a number or infinite, ${where}. The program that wrote it failed; export the model again.`,
    );
  return refuseFile(
    fileName,
    `holds ${countOf(found.tooLarge, 'coordinate')} beyond ±10 000 000, ${where}. The file is damaged, or its unit is far too small.`,
  );
}
