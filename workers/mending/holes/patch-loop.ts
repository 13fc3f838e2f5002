/** Loops up to this long are triangulated as a whole: the work grows with the cube of their length. */
const longestWhole = 120;
/** Of longer loops about this many corners are tried as ends of a chord: bounds the search. */
const chordEnds = 2000;

/** Whether a new edge may join two corners of the loop, given by their places in it. */
export type MayJoin = (i: number, j: number) => boolean;

/**
 * Triangulates a closed loop in space with the patch of least area among those whose sharpest fold is
 * least (G. Barequet and M. Sharir, CAGD 12, 1995; P. Liepa, "Filling Holes in Meshes", SGP 2003), by
 * dynamic programming. Long loops are first parted by short chords. Null when forbidden edges leave
 * no way. @param loop flat xyz; triangles run as the loop does
 * @param onProgress called with the share of the loop that is done, once a part
 * @returns places in the loop, three each
 */
export function patchLoop(
  loop: Float64Array,
  mayJoin: MayJoin,
  onProgress: (fraction: number) => void = () => {},
): number[] | null {
  const corners = loop.length / 3;
  const triangles: number[] = [];
  const open = [Array.from({ length: corners }, (_, i) => i)];
  for (let places = open.pop(); places; places = open.pop()) {
    onProgress(triangles.length / 3 / corners);
    if (places.length <= longestWhole) {
      const part = places.length === 3 ? places : leastPatch(loop, places, mayJoin);
      if (!part) return null;
      for (const place of part) triangles.push(place);
      continue;
    }
    const chord = bestChord(loop, places, mayJoin);
    if (!chord) return null;
    const [i, j] = chord;
    open.push([...places.slice(j), ...places.slice(0, i + 1)], places.slice(i, j + 1));
  }
  return triangles;
}

/** The chord that is shortest for the way round that it saves; parts of at least an eighth each. */
function bestChord(
  loop: Float64Array,
  places: readonly number[],
  mayJoin: MayJoin,
): [number, number] | null {
  const count = places.length;
  const least = Math.max(2, count >> 3);
  let best: [number, number] | null = null;
  let shortest = Infinity;
  const stride = Math.max(1, Math.floor(count / chordEnds));
  for (let i = 0; i < count; i += stride)
    for (let j = i + least; j < count && count - (j - i) >= least; j++) {
      const length = squareDistance(loop, places[i], places[j]);
      if (length >= shortest || !mayJoin(places[i], places[j])) continue;
      shortest = length;
      best = [i, j];
    }
  return best;
}

/** Angles count in steps, so that the least area decides between folds that look the same. */
const foldSteps = 64;

function leastPatch(
  loop: Float64Array,
  places: readonly number[],
  mayJoin: MayJoin,
): number[] | null {
  const count = places.length;
  const fold = new Float64Array(count * count);
  const area = new Float64Array(count * count);
  const middle = new Int32Array(count * count).fill(-1);
  const normals = new Float64Array(3);
  const other = new Float64Array(3);
  for (let span = 2; span < count; span++)
    for (let i = 0; i + span < count; i++) {
      const j = i + span;
      const at = i * count + j;
      fold[at] = Infinity;
      area[at] = Infinity;
      if (span < count - 1 && !mayJoin(places[i], places[j])) continue;
      for (let m = i + 1; m < j; m++) {
        const [left, right] = [i * count + m, m * count + j];
        if ((m > i + 1 && middle[left] < 0) || (j > m + 1 && middle[right] < 0)) continue;
        const size = normalOf(loop, places[i], places[m], places[j], normals);
        let worst = Math.max(fold[left], fold[right]);
        if (m > i + 1) {
          normalOf(loop, places[i], places[middle[left]], places[m], other);
          worst = Math.max(worst, bend(normals, other));
        }
        if (j > m + 1) {
          normalOf(loop, places[m], places[middle[right]], places[j], other);
          worst = Math.max(worst, bend(normals, other));
        }
        const sum = area[left] + area[right] + size;
        if (worst > fold[at] || (worst === fold[at] && sum >= area[at])) continue;
        fold[at] = worst;
        area[at] = sum;
        middle[at] = m;
      }
    }
  return collect(places, middle);
}

function collect(places: readonly number[], middle: Int32Array): number[] | null {
  const count = places.length;
  const triangles: number[] = [];
  const open: [number, number][] = [[0, count - 1]];
  for (let next = open.pop(); next; next = open.pop()) {
    const [i, j] = next;
    if (j - i < 2) continue;
    const m = middle[i * count + j];
    if (m < 0) return null;
    triangles.push(places[i], places[m], places[j]);
    open.push([i, m], [m, j]);
  }
  return triangles;
}

/** Writes the unit normal; returns the area. A triangle without area gets the normal (0, 0, 0). */
function normalOf(p: Float64Array, a: number, b: number, c: number, target: Float64Array): number {
  const ux = p[3 * b] - p[3 * a];
  const uy = p[3 * b + 1] - p[3 * a + 1];
  const uz = p[3 * b + 2] - p[3 * a + 2];
  const vx = p[3 * c] - p[3 * a];
  const vy = p[3 * c + 1] - p[3 * a + 1];
  const vz = p[3 * c + 2] - p[3 * a + 2];
  const x = uy * vz - uz * vy;
  const y = uz * vx - ux * vz;
  const z = ux * vy - uy * vx;
  const length = Math.sqrt(x * x + y * y + z * z);
  const factor = length > 0 ? 1 / length : 0;
  target[0] = x * factor;
  target[1] = y * factor;
  target[2] = z * factor;
  return length / 2;
}

/** 0 for no fold between two normals, `foldSteps` for a fold back onto itself. */
function bend(a: Float64Array, b: Float64Array): number {
  return Math.round((foldSteps * (1 - (a[0] * b[0] + a[1] * b[1] + a[2] * b[2]))) / 2);
}

function squareDistance(p: Float64Array, a: number, b: number): number {
  const x = p[3 * a] - p[3 * b];
  const y = p[3 * a + 1] - p[3 * b + 1];
  const z = p[3 * a + 2] - p[3 * b + 2];
  return x * x + y * y + z * z;
}
