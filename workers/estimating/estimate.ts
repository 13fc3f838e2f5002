import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import { type Estimate, type Range } from '../../shared/jobs/plan-make.js';

/** Without a tool path an estimate is rarely better than ten per cent (common practice, no source). */
const UNSURE: Range = [0.9, 1.1];

/** What a piece amounts to before it is printed. */
export interface PrintedPart {
  readonly volumeMm3: number;
  readonly surfaceMm2: number;
  /** Columns under it, mm³: filled to the share that the profile says. */
  readonly supportMm3: number;
}

/**
 * Volume laid down for a part, mm³, without its support: the shell of its surface times the walls'
 * width, and the infill's share of what is inside; never more than the part.
 */
export function printedVolume(
  { volumeMm3, surfaceMm2 }: Pick<PrintedPart, 'volumeMm3' | 'surfaceMm2'>,
  { walls, lineWidthMm, infillPercent }: MaterialProfile,
): number {
  const shell = Math.min(volumeMm3, surfaceMm2 * walls * lineWidthMm);
  return shell + (infillPercent / 100) * (volumeMm3 - shell);
}

/** Mass, filament, time and cost of the material for one part. */
export function estimatePart(part: PrintedPart, material: MaterialProfile): Estimate {
  const laid =
    printedVolume(part, material) + (material.supportFillPercent / 100) * part.supportMm3;
  const [low, high] = [UNSURE[0] * laid, UNSURE[1] * laid];
  const gramsPerMm3 = material.densityGPerCm3 / 1000;
  const strandMm2 = (Math.PI / 4) * material.filamentMm ** 2;
  const { flowMm3PerS: flow, flowShare: share } = material;
  const massG: Range = [low * gramsPerMm3, high * gramsPerMm3];
  return {
    massG,
    filamentM: [low / strandMm2 / 1000, high / strandMm2 / 1000],
    hours: [low / (flow[1] * share[1]) / 3600, high / (flow[0] * share[0]) / 3600],
    cost: [(massG[0] / 1000) * material.pricePerKg, (massG[1] / 1000) * material.pricePerKg],
  };
}

/** Estimates of several parts together. */
export function addEstimates(estimates: readonly Estimate[]): Estimate {
  const total = (pick: (one: Estimate) => Range): Range => addRanges(estimates.map(pick));
  return {
    massG: total((one) => one.massG),
    filamentM: total((one) => one.filamentM),
    hours: total((one) => one.hours),
    cost: total((one) => one.cost),
  };
}

export function addRanges(ranges: readonly Range[]): Range {
  return ranges.reduce<Range>((sum, one) => [sum[0] + one[0], sum[1] + one[1]], [0, 0]);
}

/** Glue to be mixed for a joined area, ml: its film, and what is squeezed out. */
export function glueFor(areaMm2: number, { glue }: MaterialProfile): Range {
  const film = (areaMm2 * glue.filmMm) / 1000;
  return [film * glue.allowance[0], film * glue.allowance[1]];
}

/** Mixes for an area when each is used up within its pot life; at least one. */
export function mixesFor(areaMm2: number, { glue }: MaterialProfile): number {
  const coatedMm2 = 100 * glue.coatedCm2PerMinute * glue.potLifeMinutes;
  return Math.max(1, Math.ceil(areaMm2 / coatedMm2));
}
