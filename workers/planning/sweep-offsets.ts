/** Evenly spaced offsets per sweep, beside the special ones. */
const EVEN_OFFSETS = 30;
/** Special offsets are of use up to this many spaces in a row. */
const MOST_IN_ROW = 10;
/** Offsets closer than this share of the range are one. */
const SAME_OFFSET = 1e-4;

/**
 * Where cuts across [low, high] are looked at, mm, ascending, all strictly inside: evenly, where
 * the range divides into equal lengths that a side of the space holds, and one full side from
 * either end.
 * @param sides widths, depths and heights of the spaces
 * @param wanted further places
 */
export function sweepOffsets(
  low: number,
  high: number,
  sides: readonly number[],
  wanted: readonly number[] = [],
): Float64Array {
  const range = high - low;
  const found: number[] = [...wanted];
  for (let k = 1; k < EVEN_OFFSETS; k++) found.push(low + (range * k) / EVEN_OFFSETS);
  for (const side of new Set(sides)) {
    const parts = Math.ceil(range / side - 1e-9);
    if (parts < 2 || parts > MOST_IN_ROW) continue;
    for (let k = 1; k < parts; k++) found.push(low + (range * k) / parts);
    found.push(low + side, high - side);
  }
  found.sort((a, b) => a - b);
  const kept: number[] = [];
  for (const offset of found) {
    const previous = kept.length > 0 ? kept[kept.length - 1] : low;
    if (offset - previous > SAME_OFFSET * range && high - offset > SAME_OFFSET * range)
      kept.push(offset);
  }
  return Float64Array.from(kept);
}
