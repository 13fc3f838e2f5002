import { type JointKind } from '../../../shared/jobs/joint-plan.js';
import { type Range } from '../../../shared/jobs/plan-make.js';

/** How a joint is called on a sheet. */
export const jointNames: Readonly<Record<JointKind, string>> = {
  'loose-pin': 'Printed pins',
  'fixed-pin': 'Fixed pins',
  'stock-rod': 'Rods from stock',
  'backing-lip': 'Backing lips',
  none: 'No joint',
};

/** A range with its unit, for example "12 to 15 g"; one number where both read alike. */
export function writeRange([low, high]: Range, unit: string): string {
  const [from, to] = [shortNumber(low), shortNumber(high)];
  return from === to ? `${from}\u00a0${unit}` : `${from} to ${to}\u00a0${unit}`;
}

/** Grams, from a kilogram on in kg. */
export function writeMass(range: Range): string {
  return range[1] >= 1000
    ? writeRange([range[0] / 1000, range[1] / 1000], 'kg')
    : writeRange(range, 'g');
}

/** Two digits are as many as an estimate deserves. */
function shortNumber(value: number): string {
  if (value === 0) return '0';
  if (value >= 100) return String(Math.round(value / 10) * 10);
  return value >= 10 ? String(Math.round(value)) : String(Number(value.toPrecision(2)));
}

/** A direction of the assembled model in words: the nearest axis where it is one. */
export function writeDirection([x, y, z]: readonly [number, number, number]): string {
  const names: readonly (readonly [number, string, string])[] = [
    [x, 'to the right', 'to the left'],
    [y, 'to the back', 'to the front'],
    [z, 'up', 'down'],
  ];
  const straight = names.find(([part]) => Math.abs(part) > 0.999);
  if (straight) return straight[0] > 0 ? straight[1] : straight[2];
  return names
    .filter(([part]) => Math.abs(part) > 0.25)
    .sort((a, b) => Math.abs(b[0]) - Math.abs(a[0]))
    .map(([part, ahead, back]) => (part > 0 ? ahead : back))
    .join(' and ');
}
