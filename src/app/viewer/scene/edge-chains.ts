/** Loose ends shorter than this share of the surface's extent are scratches, not edges. */
const SCRATCH_SHARE = 0.06;

/**
 * Which edges are worth drawing: all but short chains with a loose end, as a gentle bend leaves them
 * where it comes near the angle of an edge. A closed loop is kept however short: it is a hole's rim.
 * @param ends two place numbers an edge; the same place has the same number
 * @param lengths of the edges
 * @param placeCount one more than the largest place number
 * @param extent longest side of the surface, in the unit of the lengths
 */
export function drawableEdges(
  ends: Uint32Array,
  lengths: Float32Array,
  placeCount: number,
  extent: number,
): Uint8Array {
  const parents = Uint32Array.from({ length: placeCount }, (_, at) => at);
  const degrees = new Uint32Array(placeCount);
  const root = (place: number): number => {
    while (parents[place] !== place) {
      parents[place] = parents[parents[place]!]!;
      place = parents[place]!;
    }
    return place;
  };
  for (let edge = 0; edge < lengths.length; edge++) {
    const from = ends[edge * 2]!;
    const to = ends[edge * 2 + 1]!;
    degrees[from]!++;
    degrees[to]!++;
    parents[root(from)] = root(to);
  }
  const chainLengths = new Float64Array(placeCount);
  const hasLooseEnd = new Uint8Array(placeCount);
  for (let edge = 0; edge < lengths.length; edge++) {
    const chain = root(ends[edge * 2]!);
    chainLengths[chain]! += lengths[edge]!;
    if (degrees[ends[edge * 2]!] === 1 || degrees[ends[edge * 2 + 1]!] === 1)
      hasLooseEnd[chain] = 1;
  }
  return Uint8Array.from(lengths, (_length, edge) => {
    const chain = root(ends[edge * 2]!);
    return hasLooseEnd[chain] && chainLengths[chain]! < SCRATCH_SHARE * extent ? 0 : 1;
  });
}
