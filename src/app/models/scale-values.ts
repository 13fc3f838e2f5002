import { type ValidatorFn } from '@angular/forms';
import { millimetresPerUnit, type ModelScale } from '../../../shared/api/model-scale.js';

export type Size = readonly [number, number, number];

/** What the scale form holds; empty number fields are null. */
export interface ScaleValues {
  readonly unit: ModelScale['unit'];
  readonly factor: number | null;
  readonly hasTarget: boolean;
  readonly lengthMm: number | null;
  readonly axis: 'x' | 'y' | 'z' | 'longest';
}

const largestFactor = 1e6;
const largestTargetMm = 100_000;

/** A number above `least` and at most `most`. */
export function above(least: number, most: number): ValidatorFn {
  return (control) => (isWithin(control.value, least, most) ? null : { range: true });
}

/** The scale that the form's values mean, or null while a needed number is missing or out of range. */
export function scaleFrom(values: ScaleValues): ModelScale | null {
  const { unit, factor, hasTarget, lengthMm, axis } = values;
  if (unit === 'other' && !isWithin(factor, 0, largestFactor)) return null;
  if (hasTarget && !isWithin(lengthMm, 0, largestTargetMm)) return null;
  return {
    unit,
    factor: unit === 'other' ? (factor ?? 1) : unit === 'inch' ? 25.4 : 1,
    target: hasTarget ? { axis, lengthMm: lengthMm ?? 0 } : null,
  };
}

/** The form's values for a stored scale. */
export function scaleValuesOf(scale: ModelScale): ScaleValues {
  return {
    unit: scale.unit,
    factor: scale.factor,
    hasTarget: scale.target !== null,
    lengthMm: scale.target?.lengthMm ?? null,
    axis: scale.target?.axis ?? 'z',
  };
}

/** Size in mm of a model of this size in file units. */
export function scaledSizeMm(scale: ModelScale, fileSize: Size): Size {
  const factor = millimetresPerUnit(scale, fileSize);
  return [fileSize[0] * factor, fileSize[1] * factor, fileSize[2] * factor];
}

function isWithin(value: unknown, least: number, most: number): boolean {
  return typeof value === 'number' && Number.isFinite(value) && value > least && value <= most;
}
