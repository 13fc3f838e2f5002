import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type BodyNodes, bodyNodes } from './body-nodes.js';
import { bodyFaces } from './body-faces.js';
import { cellsInFrames, roomInFrames } from './fit-frames.js';
import { type Crease, CREASE_SHARE, creasePlanes } from './judging/creases.js';
import { ZONE_CLEARANCE_MM } from './judging/plan-zone.js';
import {
  type CutFigures,
  expectedPieces,
  commonCost,
  isPoor,
  type PlanWeights,
  sightCost,
  wasteCost,
} from './objectives.js';
import { SUPPORT_PER_PIECE_MM3 } from './plan-node.js';
import { type PlanBody, type PlanPart } from './plan-part.js';
import { type SearchSpace } from './search-space.js';
import { sweepDirections } from './sweep-directions.js';
import { sweepOffsets } from './sweep-offsets.js';
import { rangeAlong, type SweepTables, sweepTables } from './sweep-tables.js';

/** What a cut does: leaves two fitting sides, takes one fitting side off, or divides the work. */
export type CutKind = 'halves' | 'takesAbove' | 'takesBelow' | 'divides';

export interface CutCandidate {
  readonly plane: Plane;
  readonly kind: CutKind;
  /** Expected pieces plus quality, in pieces: lower is better. */
  readonly score: number;
  readonly quality: number;
  /** Of the quality, what makes it worse for everybody. */
  readonly commonCost: number;
  /** Length of its seam on the surface, by the worth of the surface, mm. */
  readonly sightMm: number;
  /** Whether one side is so little of the body that the cut is no progress. */
  readonly isCrumb: boolean;
  /** Whether it leaves a sliver, a seam too small for a joint, or runs along a wall. */
  readonly isPoor: boolean;
  /** Room given away by a fitting side, in pieces. */
  readonly waste: number;
  /** How far the offset may be drawn back towards the fitting side's end, mm. */
  readonly stepMm: number;
}

/** Nodes on long edges lie this share of the space's smallest side apart. */
const NODE_SPACING = 0.14;
/** Dividing cuts kept per direction. */
const DIVIDING_CUTS = 3;
/** Planes along creases looked at per direction. */
const CREASE_PLANES = 4;
/** Columns below a leaning face are rarely all needed: share of the bound that counts. Measured, rough. */
const BOUND_SHARE = 0.5;

export interface SweptCuts {
  /** The most promising first. */
  readonly cuts: CutCandidate[];
  /** Inner-loop steps that the sweeps took, for budgets. */
  readonly work: number;
}

/** Steps per triangle of a sweep, in units of one comparison of a node with one extent. */
const STEPS_PER_FACE = 14;
/** Steps of a sweep whatever the body: judging its offsets. */
const STEPS_PER_SWEEP = 15_000;

/**
 * Sweeps one body of a part along all its directions. No cut comes near a keep-whole zone of the
 * part; none at all is found when the zones leave no room.
 */
export function cutCandidates(
  part: PlanPart,
  body: PlanBody,
  space: SearchSpace,
  weights: PlanWeights,
  random: () => number,
): SweptCuts {
  const fit = space.aimFrames;
  const nodes = bodyNodes(body.mesh, body.outer, fit, NODE_SPACING * space.leastSideMm);
  const faces = bodyFaces(body.mesh, space.worth);
  const { min, max } = boundingBox(body.mesh.positions);
  const isNear = ({ from, to }: Crease) =>
    [0, 1, 2].every((axis) => {
      const middle = (from[axis] + to[axis]) / 2;
      return middle >= min[axis] && middle <= max[axis];
    });
  const found: CutCandidate[] = [];
  const perSweep =
    STEPS_PER_SWEEP + nodes.count * fit.axisCount + STEPS_PER_FACE * faces.areas.length;
  let work = 0;
  for (const normal of sweepDirections(body.mesh, random)) {
    work += perSweep;
    const range = rangeAlong(body.mesh.positions, normal);
    const [low, high] = range;
    const kept = part.zones.map((zone) => zone.range(normal));
    const creases = creasePlanes(space.worth.creases, normal, range, isNear, CREASE_PLANES);
    const wanted = [
      ...creases.map((crease) => crease.offset),
      ...kept.flatMap(([from, to]) => [from - 2 * ZONE_CLEARANCE_MM, to + 2 * ZONE_CLEARANCE_MM]),
    ];
    const offsets = sweepOffsets(low, high, space.cells.flat(), wanted).filter((offset) =>
      kept.every(
        ([from, to]) => offset <= from - ZONE_CLEARANCE_MM || offset >= to + ZONE_CLEARANCE_MM,
      ),
    );
    if (offsets.length === 0) continue;
    const tables = sweepTables(
      { low, high, normal, offsets },
      nodes,
      faces,
      fit,
      space.overhangDegrees,
    );
    for (const { offset, lengthMm } of creases) {
      const j = offsets.indexOf(offset);
      if (j >= 0) tables.sightMm[j] -= (1 - CREASE_SHARE) * Math.min(lengthMm, tables.sightMm[j]);
    }
    const judged = { part, body, space, weights, nodes, surfaceMm2: faces.surfaceMm2 };
    found.push(...judgeSweep(tables, judged).filter((cut) => !cut.isCrumb));
  }
  // A poor cut is made only where there is no other.
  const sound = found.filter((cut) => !cut.isPoor);
  const cuts = sound.length > 0 ? sound : found;
  return { cuts: cuts.sort((a, b) => a.score - b.score), work };
}

interface Judging {
  readonly part: PlanPart;
  readonly body: PlanBody;
  readonly space: SearchSpace;
  readonly weights: PlanWeights;
  readonly nodes: BodyNodes;
  readonly surfaceMm2: number;
}

function judgeSweep(tables: SweepTables, judging: Judging): CutCandidate[] {
  const { space } = judging;
  const fit = space.aimFrames;
  const rows = tables.offsets.length;
  const fitsAbove = (j: number) =>
    roomInFrames(fit, tables.aboveLow, tables.aboveHigh, j * fit.axisCount) >= 0;
  const fitsBelow = (j: number) =>
    roomInFrames(fit, tables.belowLow, tables.belowHigh, j * fit.axisCount) >= 0;
  // A side only shrinks as the cut moves towards it, so what fits is one run from either end.
  const firstAbove = firstWhere(rows, fitsAbove);
  const lastBelow = firstWhere(rows, (j) => !fitsBelow(j)) - 1;
  const others = otherRanges(judging, tables);
  const figures = Array.from({ length: rows }, (_, j) =>
    figuresAt(tables, judging, j, j >= firstAbove, j <= lastBelow, others),
  );
  const candidateAt = (j: number, kind: CutKind): CutCandidate => {
    const common = commonCost(figures[j], judging.weights);
    const quality = common + sightCost(figures[j].sightMm, judging.weights);
    const waste = wasteCost(figures[j]);
    const support =
      (judging.weights.support * BOUND_SHARE * figures[j].supportMm3) / SUPPORT_PER_PIECE_MM3;
    return {
      plane: { normal: tables.normal, offset: tables.offsets[j] },
      kind,
      quality,
      commonCost: common,
      sightMm: figures[j].sightMm,
      isCrumb: isCrumb(figures[j]),
      isPoor: isPoor(figures[j], judging.weights),
      waste,
      score: expectedPieces(figures[j]) + waste + quality + support,
      stepMm: (tables.high - tables.low) / rows,
    };
  };
  const found: CutCandidate[] = [];
  if (firstAbove <= lastBelow) {
    const options: CutCandidate[] = [];
    for (let j = firstAbove; j <= lastBelow; j++) options.push(candidateAt(j, 'halves'));
    found.push(best(options));
    return found;
  }
  if (firstAbove < rows) found.push(candidateAt(firstAbove, 'takesAbove'));
  if (lastBelow >= 0) found.push(candidateAt(lastBelow, 'takesBelow'));
  const dividing: CutCandidate[] = [];
  for (let j = 0; j < rows; j++) {
    const kind = j >= firstAbove ? 'takesAbove' : j <= lastBelow ? 'takesBelow' : 'divides';
    if (j !== firstAbove && j !== lastBelow) dividing.push(candidateAt(j, kind));
  }
  dividing.sort((a, b) => a.score - b.score);
  found.push(...dividing.slice(0, DIVIDING_CUTS));
  return found;
}

/** Less of a body's volume and of its surface than that is a crumb. */
const CRUMB_SHARE = 1e-3;

function isCrumb(cut: CutFigures): boolean {
  const total = cut.volumeAboveMm3 + cut.volumeBelowMm3;
  const volume = Math.min(cut.volumeAboveMm3, cut.volumeBelowMm3) / (total || 1);
  const above = cut.surfaceAboveMm2 / (cut.surfaceMm2 || 1);
  return volume < CRUMB_SHARE && Math.min(above, 1 - above) < CRUMB_SHARE;
}

function best(options: readonly CutCandidate[]): CutCandidate {
  return options.reduce((a, b) => (b.score < a.score ? b : a));
}

/** The first number in [0, count) from which on a monotone test holds; count when it never does. */
function firstWhere(count: number, test: (k: number) => boolean): number {
  let low = 0;
  let high = count;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (test(middle)) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** Where the part's other bodies lie along the sweep. */
function otherRanges({ part, body }: Judging, { normal }: SweepTables): [number, number][] {
  return part.bodies
    .filter((other) => other !== body)
    .map((other) => rangeAlong(other.mesh.positions, normal));
}

function figuresAt(
  tables: SweepTables,
  { body, space, surfaceMm2 }: Judging,
  j: number,
  aboveFits: boolean,
  belowFits: boolean,
  others: readonly [number, number][],
): CutFigures {
  const fit = space.aimFrames;
  const at = j * fit.axisCount;
  const offset = tables.offsets[j];
  const volumeAboveMm3 = tables.volumeAboveMm3[j];
  const volumeBelowMm3 = Math.max(0, body.volumeMm3 - volumeAboveMm3);
  const cells = (low: Float32Array, high: Float32Array, volume: number) =>
    Math.max(2, volume / space.volumeMm3, cellsInFrames(fit, space.cells, low, high, at));
  let alsoCut = 0;
  for (const [low, high] of others) if (low < offset && offset < high) alsoCut++;
  return {
    cellsAbove: aboveFits ? 1 : cells(tables.aboveLow, tables.aboveHigh, volumeAboveMm3),
    cellsBelow: belowFits ? 1 : cells(tables.belowLow, tables.belowHigh, volumeBelowMm3),
    alsoCut,
    seamMm2: tables.seamMm2[j],
    faceMm2: space.leastSideMm ** 2,
    // Of a side that is cut further nothing can be said yet.
    supportMm3:
      (aboveFits ? tables.supportAboveMm3[j] : 0) + (belowFits ? tables.supportBelowMm3[j] : 0),
    sightMm: tables.sightMm[j],
    wallMm2: tables.wallMm2[j],
    surfaceMm2,
    thinMm: Math.min(offset - tables.low, tables.high - offset),
    volumeAboveMm3,
    volumeBelowMm3,
    surfaceAboveMm2: tables.surfaceAboveMm2[j],
    cells: body.cells,
  };
}
