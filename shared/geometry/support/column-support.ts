import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { planeFrame, type PlaneFrame } from '../vectors/plane-frame.js';
import { type Vector3 } from '../vectors/plane.js';
import { ColumnCrossings } from './column-crossings.js';
import { HeldList } from './held-list.js';

export interface SupportQuestion {
  /** Closed, outward, mm. Caps of trial cuts, whose triangles may overlap, are allowed. */
  readonly mesh: TriangleMesh;
  /** Build direction, length 1. */
  readonly up: Vector3;
  /** Side of a column, mm. */
  readonly pitchMm: number;
  /** Faces that lean further than this from the vertical need support, degrees. */
  readonly overhangDegrees: number;
  /** Level faces over gaps no wider than this carry themselves, mm; 0 or absent: none do. */
  readonly bridgeMm?: number;
}

export interface SupportFigures {
  /** Columns from below a face that needs support down to the next solid or the plate, mm³. */
  readonly volumeMm3: number;
  /** What these columns hold up, seen from above, mm². */
  readonly areaMm2: number;
}

/** The columns that hold a body up, in a right-handed frame whose z is the build direction. */
export interface HeldColumns extends SupportFigures, PlaneFrame {
  /** Middles, feet and heads, mm: x, y, from, to for each column. */
  readonly columns: Float64Array;
  readonly pitchMm: number;
}

/** Gaps lower than this lie on what is below, mm: rounding. */
const LEAST_GAP_MM = 1e-3;
/** Solid thinner than this is rounding, mm. */
const LEAST_SOLID_MM = 1e-6;

/**
 * Support of a body that stands on a plate at its lowest point. The space is divided into square
 * columns; the surface's crossings of each column's middle are sorted, and the gaps below faces
 * that lean too far are summed. A face leans by asin(−n·up) from the vertical; what lies on the
 * plate needs nothing. Level faces between two walls that stand no farther apart than the bridge
 * limit, along x or y of the frame, need nothing either. Converges with the pitch; an empty mesh
 * needs none. O(triangles + columns + crossings · log of those in one column).
 */
export function columnSupport(question: SupportQuestion): SupportFigures {
  const { volumeMm3, areaMm2 } = heldColumns(question);
  return { volumeMm3, areaMm2 };
}

/** The same with every column: for pictures and for what becomes of the support. */
export function heldColumns(question: SupportQuestion): HeldColumns {
  const { mesh, pitchMm, bridgeMm = 0 } = question;
  const frame = planeFrame(question.up);
  if (mesh.indices.length === 0)
    return { ...frame, volumeMm3: 0, areaMm2: 0, columns: new Float64Array(0), pitchMm };
  const { x, y, z } = project(mesh.positions, question.up, frame);
  const grid = ColumnCrossings.over(x, y, pitchMm);
  const leanSin = Math.sin((question.overhangDegrees * Math.PI) / 180);
  grid.addSurface(mesh.indices, x, y, z, leanSin);
  let plate = Infinity;
  for (let k = 0; k < z.length; k++) if (z[k] < plate) plate = z[k];
  const held = new HeldList(bridgeMm > 0 ? grid.across * grid.along : 0);
  grid.visit((crossings, column) => {
    let inside = 0;
    let top = plate;
    let bottom = plate;
    let step = 0;
    for (let k = 0; k < crossings.count; k++) {
      const way = crossings.steps[k];
      const height = crossings.heights[k];
      const before = inside;
      inside += way > 0 ? 1 : -1;
      if (way > 0 && before <= 0 && inside >= 1) {
        bottom = height;
        step = way;
      } else if (way < 0 && before >= 1 && inside <= 0) {
        // Overlapping triangles of one face: nothing is there to be held.
        if (height - bottom <= LEAST_SOLID_MM) continue;
        if (step >= 2 && bottom - top > LEAST_GAP_MM) held.add(column, top, bottom, step === 3);
        held.addSolid(column, bottom, height);
        top = height;
      }
    }
  });
  if (bridgeMm > 0) held.dropBridges(grid, bridgeMm);
  return { ...frame, ...held.figures(grid) };
}

/** The vertices in a right-handed frame whose z is `up`. */
function project(positions: Float64Array, up: Vector3, { u, v }: PlaneFrame) {
  const count = positions.length / 3;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const z = new Float64Array(count);
  for (let k = 0, at = 0; k < count; k++, at += 3) {
    const px = positions[at];
    const py = positions[at + 1];
    const pz = positions[at + 2];
    x[k] = u[0] * px + u[1] * py + u[2] * pz;
    y[k] = v[0] * px + v[1] * py + v[2] * pz;
    z[k] = up[0] * px + up[1] * py + up[2] * pz;
  }
  return { x, y, z };
}
