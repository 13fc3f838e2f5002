/** A longer run than this is broken, so that a long contour costs no more than its length. */
const LONGEST_RUN = 48;

/**
 * The same lines with fewer segments: runs of segments that hang together become one where no point
 * on the way is farther from it than the tolerance. Ends of runs stay where they are, so contours
 * stay closed. Lines of seams have a segment for every triangle they pass, far more than a screen
 * shows.
 * @param segments flat xyz, two points a segment; contours in order, each segment beginning where
 *   the last one ended
 * @param tolerance in the unit of the segments
 */
export function simplifyLines(segments: Float32Array, tolerance: number): Float32Array {
  const kept = new Float32Array(segments.length);
  let length = 0;
  for (let start = 0; start < segments.length;) {
    let end = start;
    while (
      end + 6 < segments.length &&
      (end - start) / 6 < LONGEST_RUN &&
      hangsOn(segments, end) &&
      isNearChord(segments, start, end + 6, tolerance)
    )
      end += 6;
    kept.set(segments.subarray(start, start + 3), length);
    kept.set(segments.subarray(end + 3, end + 6), length + 3);
    length += 6;
    start = end + 6;
  }
  return kept.slice(0, length);
}

/** Whether the next segment begins where this one ends. */
function hangsOn(segments: Float32Array, at: number): boolean {
  return (
    segments[at + 3] === segments[at + 6] &&
    segments[at + 4] === segments[at + 7] &&
    segments[at + 5] === segments[at + 8]
  );
}

/** Whether every point between is near the straight line from one segment's start to another's end. */
function isNearChord(
  segments: Float32Array,
  first: number,
  last: number,
  tolerance: number,
): boolean {
  const ax = segments[first]!;
  const ay = segments[first + 1]!;
  const az = segments[first + 2]!;
  const cx = segments[last + 3]! - ax;
  const cy = segments[last + 4]! - ay;
  const cz = segments[last + 5]! - az;
  const chordSquared = cx * cx + cy * cy + cz * cz;
  for (let at = first; at < last; at += 6) {
    const px = segments[at + 3]! - ax;
    const py = segments[at + 4]! - ay;
    const pz = segments[at + 5]! - az;
    const along = chordSquared > 0 ? (px * cx + py * cy + pz * cz) / chordSquared : 0;
    const within = Math.min(Math.max(along, 0), 1);
    const dx = px - within * cx;
    const dy = py - within * cy;
    const dz = pz - within * cz;
    if (dx * dx + dy * dy + dz * dz > tolerance * tolerance) return false;
  }
  return true;
}
