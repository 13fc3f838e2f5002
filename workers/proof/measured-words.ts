import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';

/** Names of at most five, then how many more: `P01, P02 and 3 more`. */
export function listed(pieces: readonly { name: string }[]): string {
  const first = pieces.slice(0, 5).map((piece) => piece.name);
  const more = pieces.length - first.length;
  return first.join(', ') + (more > 0 ? ` and ${more} more` : '');
}

export function counted(count: number, one: string): string {
  return `${count} ${one}${count === 1 ? '' : 's'}`;
}

/** Nine digits at most: enough to see that two volumes agree. */
export function shown(value: number): string {
  return String(Number(value.toPrecision(9)));
}

/** A length in mm to a hundredth; smaller ones with one digit. */
export function length(valueMm: number): string {
  if (valueMm === 0) return '0';
  return Math.abs(valueMm) >= 0.01 ? valueMm.toFixed(2) : valueMm.toPrecision(1);
}

export function sum(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0);
}

export function spaceInWords(space: BuildSpace): string {
  return space.shape === 'round'
    ? `⌀ ${space.diameterMm} × ${space.heightMm} mm`
    : `${space.widthMm} × ${space.depthMm} × ${space.heightMm} mm`;
}
