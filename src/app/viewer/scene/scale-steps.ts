/** A bar of a round length, as long as fits. */
export interface ScaleBar {
  readonly lengthMm: number;
  readonly widthPx: number;
}

/**
 * The longest bar of 1, 2 or 5 × 10ⁿ millimetres that is not wider than `maxWidthPx`.
 * @param pixelsPerMm from the camera; true at every depth because it is orthographic
 */
export function scaleBarFor(pixelsPerMm: number, maxWidthPx: number): ScaleBar {
  const lengthMm = roundDown(maxWidthPx / pixelsPerMm);
  return { lengthMm, widthPx: lengthMm * pixelsPerMm };
}

/** Largest of 1, 2, 5 × 10ⁿ that is not above `value`. */
function roundDown(value: number): number {
  const power = Math.floor(Math.log10(value));
  for (const step of [5, 2, 1]) {
    const candidate = step * 10 ** power;
    // A value that is a step itself must not fall to the next one for a rounding error.
    if (candidate <= value * (1 + 1e-12)) return candidate;
  }
  return 10 ** power;
}

/** Grid spacings, mm. The sheet's own is 10 mm; small and large objects need others. */
const gridSteps = [1, 10, 50, 100, 500, 1_000, 5_000, 10_000] as const;
/** More lines than this across the object turn into a grey haze. */
const MOST_LINES = 60;

/** Spacing of the grid under an object of this size, mm: 10 unless the object asks for another. */
export function gridStepFor(longestMm: number): number {
  if (longestMm < 20) return 1;
  for (const step of gridSteps) if (step >= 10 && longestMm / step <= MOST_LINES) return step;
  return gridSteps[gridSteps.length - 1]!;
}

/** A length of the scale bar in words: millimetres, metres from 1000 mm. */
export function lengthLabel(lengthMm: number): string {
  return lengthMm >= 1_000 ? `${lengthMm / 1_000} m` : `${Number(lengthMm.toPrecision(3))} mm`;
}
