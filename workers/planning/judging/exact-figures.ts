import { type Body, type PlaneTree } from '../../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../../shared/geometry/vectors/plane.js';
import { type Objectives } from '../../../shared/jobs/plan-make.js';
import { leafPath, listCuts } from '../exact-plan.js';
import { poseExactly } from '../pose-exactly.js';
import { type BodySupport, leastSupport, supportOn } from './body-support.js';
import { bendingStress, type BondedSection, bondedSection, sideOf } from './seam-strength.js';
import { seamCost, type SeamSegments } from './seam-sight.js';
import { type SurfaceWorth } from './surface-worth.js';

/** What one cut of an exact plan amounts to. */
export interface CutFigures {
  readonly areaMm2: number;
  readonly sightMm: number;
  /** Length of its seams on the surface, whether seen or not, mm. */
  readonly outlineMm: number;
  /** Of that, where it follows a crease. */
  readonly creaseMm: number;
  readonly bendingKpa: number;
}

/** What an exact plan amounts to. */
export interface ExactFigures {
  readonly objectives: Objectives;
  /** By the cuts' numbers in preorder, from 0. */
  readonly cuts: readonly CutFigures[];
  /** By the bodies' order. */
  readonly bodies: readonly BodySupport[];
}

/** Columns across a piece, and resting directions looked at closely. */
const COLUMNS = 90;
const TRIES = 5;

/**
 * Measures the exact pieces of a plan: support of each in its own best orientation, and seams.
 * @param offsets as really used, in preorder
 */
export function measurePlan(
  tree: PlaneTree,
  bodies: readonly Body[],
  offsets: readonly number[],
  task: {
    readonly spaces: readonly BuildSpace[];
    readonly overhangDegrees: number;
    readonly worth: SurfaceWorth;
    readonly onStep: (fraction: number) => void;
  },
): ExactFigures {
  const { spaces, overhangDegrees, worth, onStep } = task;
  const supports = bodies.map(({ mesh }, k) => {
    onStep((0.7 * k) / bodies.length);
    return bodySupport(mesh, spaces, overhangDegrees);
  });
  const sights = seamCost(
    bodies.map((body) => body.mesh),
    offsets.length,
    worth,
  );
  const cuts = listCuts(tree).map(({ path, plane }, k) => {
    onStep(0.7 + (0.3 * k) / offsets.length);
    const placed = { normal: plane.normal, offset: offsets[k] };
    return cutFigures(path, placed, k + 1, bodies, sights[k]);
  });
  return {
    objectives: {
      pieces: bodies.length,
      supportMm3: supports.reduce((sum, one) => sum + one.supportMm3, 0),
      visibleSeamMm: cuts.reduce((sum, one) => sum + one.sightMm, 0),
      weakestSeamKpa: cuts.reduce((most, one) => Math.max(most, one.bendingKpa), 0),
    },
    cuts,
    bodies: supports,
  };
}

/** The best of the resting directions; of a body that only a diagonal holds, that one. */
function bodySupport(
  mesh: TriangleMesh,
  spaces: readonly BuildSpace[],
  overhangDegrees: number,
): BodySupport {
  const task = { spaces, overhangDegrees, columns: COLUMNS, tries: TRIES };
  const found = leastSupport(mesh, task);
  if (found) return found;
  const { down, space } = poseExactly(mesh, spaces);
  return { supportMm3: supportOn(mesh, down, task), down, space };
}

function cutFigures(
  path: string,
  plane: Plane,
  tag: number,
  bodies: readonly Body[],
  sight: SeamSegments,
): CutFigures {
  const beyond = (side: 'a' | 'b') =>
    bodies.filter((body) => leafPath(body).startsWith(path + side)).map((body) => body.mesh);
  const below = beyond('b');
  const section = joinSections(below.map((mesh) => bondedSection(mesh, plane, tag)));
  return {
    areaMm2: section?.areaMm2 ?? 0,
    ...sight,
    bendingKpa: section ? bendingStress(section, sideOf(beyond('a')), sideOf(below)) : 0,
  };
}

/** Sections of several pieces in one plane taken as one: the moduli about their own middles add. */
function joinSections(sections: readonly (BondedSection | null)[]): BondedSection | null {
  const found = sections.filter((one) => one !== null);
  if (found.length < 2) return found[0] ?? null;
  const areaMm2 = found.reduce((sum, one) => sum + one.areaMm2, 0);
  const middle = [0, 1, 2].map(
    (axis) => found.reduce((sum, one) => sum + one.areaMm2 * one.middle[axis], 0) / areaMm2,
  );
  return {
    areaMm2,
    middle: [middle[0], middle[1], middle[2]],
    modulusMm3: found.reduce((sum, one) => sum + one.modulusMm3, 0),
  };
}
