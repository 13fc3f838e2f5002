import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { cubeDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { planeFrame } from '../../shared/geometry/vectors/plane-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { cross } from '../../shared/geometry/vectors/vector3.js';

/** Rotations on the bed tried per resting direction, evenly over a quarter turn. */
const TURNS = 4;
/** Width, depth and height of the cell that parts are measured in, mm. */
export type Cell = readonly [number, number, number];

/** Directions whose cosine is above this are one axis. */
const SAME_AXIS = 1 - 1e-9;

/**
 * The orientations of the quick fit test: each resting direction of the cube (13 up to sign) with
 * four rotations on the bed. All of them measure extents along one shared list of axes, so the
 * extents of a part (a k-DOP) answer all of them by look-ups. Sufficient, never necessary: what
 * passes really fits.
 */
export interface FitFrames {
  /** Unit axes, flat xyz, length 3 × axisCount. */
  readonly axes: Float64Array;
  readonly axisCount: number;
  /** Per frame three axis numbers: height, along, across. Length 3 × frameCount. */
  readonly frames: Uint16Array;
  readonly frameCount: number;
  /** Any of them will do. */
  readonly spaces: readonly BuildSpace[];
}

export function makeFitFrames(
  spaces: readonly BuildSpace[],
  extraDowns: readonly Vector3[] = [],
): FitFrames {
  const axes: Vector3[] = [];
  const frames: number[] = [];
  const numberOf = (axis: Vector3): number => {
    const found = axes.findIndex(
      (a) => Math.abs(a[0] * axis[0] + a[1] * axis[1] + a[2] * axis[2]) > SAME_AXIS,
    );
    return found >= 0 ? found : axes.push(axis) - 1;
  };
  const downs = [...cubeDirections.filter(isFirstOfPair), ...extraDowns];
  for (const down of downs) {
    const { u } = planeFrame(down);
    const v = cross(down, u);
    for (let turn = 0; turn < TURNS; turn++) {
      const c = Math.cos((Math.PI / 2 / TURNS) * turn);
      const s = Math.sin((Math.PI / 2 / TURNS) * turn);
      frames.push(
        numberOf(down),
        numberOf([c * u[0] + s * v[0], c * u[1] + s * v[1], c * u[2] + s * v[2]]),
        numberOf([c * v[0] - s * u[0], c * v[1] - s * u[1], c * v[2] - s * u[2]]),
      );
    }
  }
  return {
    axes: Float64Array.from(axes.flat()),
    axisCount: axes.length,
    frames: Uint16Array.from(frames),
    frameCount: frames.length / 3,
    spaces,
  };
}

function isFirstOfPair([x, y, z]: Vector3): boolean {
  return x > 0 || (x === 0 && (y > 0 || (y === 0 && z > 0)));
}

/**
 * Room left in the best frame of the roomiest space, mm; negative when no frame of any space fits.
 * @param low  least projection on each axis, length axisCount, read from `at`
 * @param high greatest projection; both −Infinity/Infinity reversed for an empty part, which fits
 */
export function roomInFrames(
  fit: FitFrames,
  low: Float32Array | Float64Array,
  high: Float32Array | Float64Array,
  at = 0,
): number {
  let best = -Infinity;
  for (const space of fit.spaces) {
    const room = roomInSpace(fit, space, low, high, at);
    if (room > best) best = room;
  }
  return best;
}

function roomInSpace(
  fit: FitFrames,
  space: BuildSpace,
  low: Float32Array | Float64Array,
  high: Float32Array | Float64Array,
  at: number,
): number {
  const { frames } = fit;
  const isRound = space.shape === 'round';
  const width = isRound ? space.diameterMm : space.widthMm;
  const depth = isRound ? space.diameterMm : space.depthMm;
  let best = -Infinity;
  for (let k = 0; k < frames.length; k += 3) {
    const h = at + frames[k];
    const overhead = space.heightMm - (high[h] - low[h]);
    if (overhead <= best) continue;
    let onBed: number;
    if (isRound) {
      // The footprint lies in the octagon of all four turns; its corners lie in this circle.
      const first = k - (k % (3 * TURNS));
      onBed = width - roundReach(fit, low, high, at, first);
    } else {
      const u = at + frames[k + 1];
      const v = at + frames[k + 2];
      const along = high[u] - low[u];
      const across = high[v] - low[v];
      const straight = Math.min(width - along, depth - across);
      const turned = Math.min(width - across, depth - along);
      onBed = straight > turned ? straight : turned;
    }
    const room = overhead < onBed ? overhead : onBed;
    if (room > best) best = room;
  }
  return best;
}

/** Corners of a regular polygon with 4·TURNS sides lie this much farther out than its sides. */
const CORNER = 1 / Math.cos(Math.PI / (4 * TURNS));

/** Diameter of a circle about the first turn's middle that surely holds the footprint, mm. */
function roundReach(
  { axes, frames }: FitFrames,
  low: Float32Array | Float64Array,
  high: Float32Array | Float64Array,
  at: number,
  first: number,
): number {
  const u = frames[first + 1];
  const v = frames[first + 2];
  const mu = (low[at + u] + high[at + u]) / 2;
  const mv = (low[at + v] + high[at + v]) / 2;
  let reach = 0;
  for (let k = first; k < first + 3 * TURNS; k += 3) {
    for (let side = 1; side <= 2; side++) {
      const a = frames[k + side];
      const alongU =
        axes[3 * a] * axes[3 * u] +
        axes[3 * a + 1] * axes[3 * u + 1] +
        axes[3 * a + 2] * axes[3 * u + 2];
      const alongV =
        axes[3 * a] * axes[3 * v] +
        axes[3 * a + 1] * axes[3 * v + 1] +
        axes[3 * a + 2] * axes[3 * v + 2];
      const middle = alongU * mu + alongV * mv;
      const out = Math.max(high[at + a] - middle, middle - low[at + a]);
      if (out > reach) reach = out;
    }
  }
  return 2 * reach * CORNER;
}

/**
 * How many cells of the space's size a box around the part takes in its best frame, whole cells
 * and as a fraction mixed half and half: whole cells are what blocks need, fractions tell rounded
 * parts apart. At least 1.
 */
export function cellsInFrames(
  fit: FitFrames,
  cells: readonly Cell[],
  low: Float32Array | Float64Array,
  high: Float32Array | Float64Array,
  at = 0,
): number {
  let best = Infinity;
  for (const cell of cells) {
    const count = cellsOfSize(fit, cell, low, high, at);
    if (count < best) best = count;
  }
  return best;
}

function cellsOfSize(
  fit: FitFrames,
  [width, depth, height]: Cell,
  low: Float32Array | Float64Array,
  high: Float32Array | Float64Array,
  at: number,
): number {
  const { frames } = fit;
  let best = Infinity;
  for (let k = 0; k < frames.length; k += 3) {
    const h = at + frames[k];
    const u = at + frames[k + 1];
    const v = at + frames[k + 2];
    const tall = (high[h] - low[h]) / height;
    const along = high[u] - low[u];
    const across = high[v] - low[v];
    const layers = wholeCells(tall);
    const tallPart = tall > 1 ? tall : 1;
    for (let turned = 0; turned < 2; turned++) {
      const a = (turned ? across : along) / width;
      const b = (turned ? along : across) / depth;
      const whole = layers * wholeCells(a) * wholeCells(b);
      const part = tallPart * (a > 1 ? a : 1) * (b > 1 ? b : 1);
      const cells = (whole + part) / 2;
      if (cells < best) best = cells;
    }
  }
  return best;
}

/** Lengths this close above a whole number of cells count as that number. */
const CELL_ROUNDING = 1e-6;

export function wholeCells(ratio: number): number {
  return ratio <= 1 ? 1 : Math.ceil(ratio - CELL_ROUNDING);
}

/** Least and greatest projections of points on every axis: the part's k-DOP. */
export function extentsOf(
  fit: FitFrames,
  points: Float64Array,
  low: Float64Array,
  high: Float64Array,
): void {
  const { axes, axisCount } = fit;
  for (let a = 0; a < axisCount; a++) {
    const x = axes[3 * a];
    const y = axes[3 * a + 1];
    const z = axes[3 * a + 2];
    let least = Infinity;
    let most = -Infinity;
    for (let k = 0; k < points.length; k += 3) {
      const along = x * points[k] + y * points[k + 1] + z * points[k + 2];
      if (along < least) least = along;
      if (along > most) most = along;
    }
    low[a] = least;
    high[a] = most;
  }
}
