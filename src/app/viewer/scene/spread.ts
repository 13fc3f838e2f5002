import { type Triple } from './view-parts';

/** How far a piece travels at full spread, as a multiple of its distance from the model's centre. */
const FULL_SPREAD = 0.9;
/** Centres closer than this share of the model's longest side count as one place. */
const SAME_PLACE_SHARE = 1e-3;
/** Pieces in one place part by this share of the model's longest side at full spread. */
const PARTING_SHARE = 0.6;

/**
 * How far each piece is moved so that the pieces come apart, mm.
 *
 * Proportional to the way from the model's centre to the piece's, so neighbours keep their order
 * and mirrored pieces stay mirrored. Pieces whose centres coincide (one inside another) would stay
 * on top of each other: those are parted one after another along the model's shortest axis.
 * @param centres centres of the pieces' boxes, mm
 * @param modelCentre centre of the model's box, mm
 * @param modelSize size of the model's box, mm
 * @param fraction 0 leaves everything assembled, 1 is as far apart as it goes
 */
export function spreadOffsets(
  centres: readonly Triple[],
  modelCentre: Triple,
  modelSize: Triple,
  fraction: number,
): Triple[] {
  const longest = Math.max(...modelSize);
  const shortestAxis = modelSize.indexOf(Math.min(...modelSize));
  const samePlaceMm = longest * SAME_PLACE_SHARE;
  return centres.map((centre, index) => {
    const offset: [number, number, number] = [0, 0, 0];
    for (let axis = 0; axis < 3; axis++)
      offset[axis] = (centre[axis]! - modelCentre[axis]!) * FULL_SPREAD * fraction;
    const before = countInPlace(centres, index, samePlaceMm);
    offset[shortestAxis]! += before * longest * PARTING_SHARE * fraction;
    return offset;
  });
}

/** How many earlier pieces have the same centre. */
function countInPlace(centres: readonly Triple[], index: number, toleranceMm: number): number {
  const [x, y, z] = centres[index]!;
  let count = 0;
  for (let other = 0; other < index; other++) {
    const [ox, oy, oz] = centres[other]!;
    if (Math.hypot(x - ox, y - oy, z - oz) <= toleranceMm) count++;
  }
  return count;
}
