import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { planeFrame } from '../vectors/plane-frame.js';
import { type Vector3 } from '../vectors/plane.js';
import { ColumnCrossings } from './column-crossings.js';

export interface SupportQuestion {
  /** Closed, outward, mm. Caps of trial cuts, whose triangles may overlap, are allowed. */
  readonly mesh: TriangleMesh;
  /** Build direction, length 1. */
  readonly up: Vector3;
  /** Side of a column, mm. */
  readonly pitchMm: number;
  /** Faces that lean further than this from the vertical need support, degrees. */
  readonly overhangDegrees: number;
}

export interface SupportFigures {
  /** Columns from below a face that needs support down to the next solid or the plate, mm³. */
  readonly volumeMm3: number;
  /** What these columns hold up, seen from above, mm². */
  readonly areaMm2: number;
}

/** Gaps lower than this lie on what is below, mm: rounding. */
const LEAST_GAP_MM = 1e-3;
/** Solid thinner than this is rounding, mm. */
const LEAST_SOLID_MM = 1e-6;

/**
 * Support of a body that stands on a plate at its lowest point. The space is divided into square
 * columns; the surface's crossings of each column's middle are sorted, and the gaps below faces
 * that lean too far are summed. A face leans by asin(−n·up) from the vertical; what lies on the
 * plate needs nothing. Converges with the pitch; an empty mesh needs none.
 * O(triangles + columns + crossings · log of those in one column).
 */
export function columnSupport(question: SupportQuestion): SupportFigures {
  const { mesh, pitchMm } = question;
  if (mesh.indices.length === 0) return { volumeMm3: 0, areaMm2: 0 };
  const { x, y, z } = project(mesh.positions, question.up);
  const columns = ColumnCrossings.over(x, y, pitchMm);
  const leanSin = Math.sin((question.overhangDegrees * Math.PI) / 180);
  columns.addSurface(mesh.indices, x, y, z, leanSin);
  let plate = Infinity;
  for (let k = 0; k < z.length; k++) if (z[k] < plate) plate = z[k];
  let gaps = 0;
  let held = 0;
  columns.visit((crossings) => {
    let inside = 0;
    let top = plate;
    let bottom = plate;
    let isHeld = false;
    for (let k = 0; k < crossings.count; k++) {
      const step = crossings.steps[k];
      const height = crossings.heights[k];
      const before = inside;
      inside += step > 0 ? 1 : -1;
      if (step > 0 && before <= 0 && inside >= 1) {
        bottom = height;
        isHeld = step === 2;
      } else if (step < 0 && before >= 1 && inside <= 0) {
        // Overlapping triangles of one face: nothing is there to be held.
        if (height - bottom <= LEAST_SOLID_MM) continue;
        if (isHeld && bottom - top > LEAST_GAP_MM) {
          gaps += bottom - top;
          held++;
        }
        top = height;
      }
    }
  });
  const cell = pitchMm * pitchMm;
  return { volumeMm3: gaps * cell, areaMm2: held * cell };
}

/** The vertices in a right-handed frame whose z is `up`. */
function project(positions: Float64Array, up: Vector3) {
  const { u, v } = planeFrame(up);
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
