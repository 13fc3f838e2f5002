import { type BuildSpace } from './build-space.js';

/** Diagonal of the bed, or its diameter when round, mm. */
export function bedDiagonal(space: BuildSpace): number {
  return space.shape === 'round' ? space.diameterMm : Math.hypot(space.widthMm, space.depthMm);
}

/** The longest straight line inside the space, mm: no two points of a piece lie farther apart. */
export function spaceDiagonal(space: BuildSpace): number {
  return Math.hypot(bedDiagonal(space), space.heightMm);
}

/** Volume of the space, mm³. */
export function spaceVolume(space: BuildSpace): number {
  return space.shape === 'round'
    ? (Math.PI / 4) * space.diameterMm ** 2 * space.heightMm
    : space.widthMm * space.depthMm * space.heightMm;
}

/** The space with `mm` taken off every dimension (both sides together); never below 1e-3 mm. */
export function shrinkSpace(space: BuildSpace, mm: number): BuildSpace {
  const less = (length: number) => Math.max(1e-3, length - mm);
  return space.shape === 'round'
    ? { shape: 'round', diameterMm: less(space.diameterMm), heightMm: less(space.heightMm) }
    : {
        shape: 'rectangular',
        widthMm: less(space.widthMm),
        depthMm: less(space.depthMm),
        heightMm: less(space.heightMm),
      };
}

/**
 * Sides of the axis-aligned box used for grids, mm: the space itself, or for a round bed the
 * square inscribed in it.
 */
export function gridCell(space: BuildSpace): readonly [number, number, number] {
  if (space.shape === 'rectangular') return [space.widthMm, space.depthMm, space.heightMm];
  const side = space.diameterMm / Math.SQRT2;
  return [side, side, space.heightMm];
}

/** In words: `220 × 220 × 250 mm` or `⌀ 200 × 300 mm`. */
export function spaceInWords(space: BuildSpace): string {
  const shown = (mm: number) => String(Number(mm.toFixed(2)));
  return space.shape === 'round'
    ? `⌀ ${shown(space.diameterMm)} × ${shown(space.heightMm)} mm`
    : `${shown(space.widthMm)} × ${shown(space.depthMm)} × ${shown(space.heightMm)} mm`;
}
