import { type HoleReport } from '../../../../shared/jobs/model-inspect.js';

/** How many of the open holes a limit fills, limit and rims in the same unit. */
export function filledBy(holes: readonly HoleReport[], limit: number): number {
  return holes.filter((hole) => !hole.isFilled && hole.perimeter <= limit).length;
}

/**
 * The limit to ask for when a person wants rims up to so many mm filled. What is shown is rounded to a
 * tenth, so a rim that shows just that length is meant as well.
 */
export function limitInFileUnits(lengthMm: number, millimetres: number): number {
  return (lengthMm + 0.051) / millimetres;
}
