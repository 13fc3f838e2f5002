import { type ValidationErrors, type ValidatorFn } from '@angular/forms';
import { writeGivenMm } from '../ui/format/quantities';

/**
 * A number above `least` (or from it on, when `orEqual`) and at most `most`, in mm. The error `range` is the sentence to show; an empty field fails too.
 */
export function numberWithin(limits: {
  readonly least: number;
  readonly most: number;
  readonly orEqual?: boolean;
}): ValidatorFn {
  const { least, most, orEqual } = limits;
  const from = orEqual ? `From ${least}` : `More than ${least}`;
  const sentence = `${from}, at most ${writeGivenMm(most)}`;
  return (control): ValidationErrors | null => {
    const value: unknown = control.value;
    const isNumber = typeof value === 'number' && Number.isFinite(value);
    const isWithin = isNumber && (orEqual ? value >= least : value > least) && value <= most;
    return isWithin ? null : { range: sentence };
  };
}

/** Something other than spaces, at most `most` characters. */
export function nameWithin(most: number): ValidatorFn {
  return (control): ValidationErrors | null => {
    const name = String(control.value ?? '').trim();
    if (name === '') return { name: 'Give the envelope a name' };
    return name.length > most ? { name: `A name has at most ${most} characters` } : null;
  };
}

interface EnvelopeFields {
  readonly shape: 'rectangular' | 'round';
  readonly widthMm: number | null;
  readonly depthMm: number | null;
  readonly diameterMm: number | null;
  readonly marginMm: number | null;
  readonly nozzleMm: number | null;
  readonly layerHeightMm: number | null;
}

/** The margin must leave some bed; silent until the numbers it needs are there. */
export const marginLeavesBed: ValidatorFn = (group): ValidationErrors | null => {
  const fields = group.value as EnvelopeFields;
  const sides = fields.shape === 'round' ? [fields.diameterMm] : [fields.widthMm, fields.depthMm];
  const marginMm = fields.marginMm;
  const isTooWide = sides.some(
    (side) => typeof side === 'number' && typeof marginMm === 'number' && side <= 2 * marginMm,
  );
  return isTooWide ? { margin: 'The margin leaves no room on the bed' } : null;
};

/** A layer higher than the nozzle is wide does not stick to the one below. */
export const layerBelowNozzle: ValidatorFn = (group): ValidationErrors | null => {
  const { layerHeightMm, nozzleMm } = group.value as EnvelopeFields;
  const isTooHigh = layerHeightMm !== null && nozzleMm !== null && layerHeightMm > nozzleMm;
  return isTooHigh ? { layer: 'Layers cannot be higher than the nozzle is wide' } : null;
};
