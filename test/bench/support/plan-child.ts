import { type BuildSpace } from '../../../shared/geometry/fitting/build-space.js';
import { gridCell } from '../../../shared/geometry/fitting/space-measures.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { usualWishes } from '../../../shared/jobs/plan-wishes.js';
import { bestExactGrid, gridTree } from '../../../workers/planning/exact-grids.js';
import { cutExactly } from '../../../workers/planning/exact-plan.js';
import { choosePlan } from '../../../workers/planning/choose-plan.js';
import { leastSupport, supportOn } from '../../../workers/planning/judging/body-support.js';
import { silentContext } from '../../../workers/runtime/job-context.js';
import { loadSolids, type Solids } from '../../../workers/solids/solid-kernel.js';
import { type ModelFamily, planModels } from './plan-models.js';

// One model in every envelope, in a process of its own, so that its memory is its own. Argument: the
// model's number. Prints a PlanChildAnswer.

export interface PlanChildAnswer {
  readonly name: string;
  readonly family: ModelFamily;
  readonly peakMb: number;
  readonly cases: PlanCase[];
}

export interface PlanCase {
  readonly space: string;
  readonly pieces: number;
  readonly gridPieces: number;
  readonly bound: number;
  readonly supportMm3: number;
  readonly offers: { pieces: number; supportMm3: number; bestAt: string[] }[];
  readonly gridUprightMm3: number;
  readonly gridBestMm3: number;
  readonly firstMs: number;
  readonly setMs: number;
}

const TOLERANCE_MM = 0.02;
const COLUMNS = 90;
const TRIES = 5;
const SPACES = [
  [220, 220, 250],
  [180, 180, 180],
  [300, 300, 300],
] as const;

async function run(): Promise<void> {
  const solids = await loadSolids();
  const model = planModels(solids)[Number(process.argv[2])]!;
  const mesh = model.make();
  const cases = SPACES.map(([widthMm, depthMm, heightMm]): PlanCase => {
    const space: BuildSpace = { shape: 'rectangular', widthMm, depthMm, heightMm };
    const startMs = performance.now();
    const choice = choosePlan({
      mesh,
      spaces: [space],
      wishes: usualWishes,
      seed: 1,
      triangulate: solids.triangulate,
      toleranceMm: TOLERANCE_MM,
      context: silentContext,
    });
    const setMs = performance.now() - startMs;
    const { bounds, figures, offers, firstPlanMs } = choice;
    return {
      space: `${widthMm}×${depthMm}×${heightMm}`,
      pieces: choice.bodies.length,
      gridPieces: bounds.gridPieces,
      bound: bounds.pieces,
      supportMm3: figures.objectives.supportMm3,
      offers: offers.map(({ objectives, bestAt }) => ({
        pieces: objectives.pieces,
        supportMm3: objectives.supportMm3,
        bestAt,
      })),
      ...gridSupport(mesh, space, solids),
      firstMs: firstPlanMs,
      setMs,
    };
  });
  const answer: PlanChildAnswer = {
    name: model.name,
    family: model.family,
    peakMb: process.resourceUsage().maxRSS / 1024,
    cases,
  };
  process.stdout.write(JSON.stringify(answer));
}

/** Support of the best grid's pieces, as they stand in the model and each in its best orientation. */
function gridSupport(mesh: TriangleMesh, space: BuildSpace, solids: Solids) {
  const { grid } = bestExactGrid(mesh, gridCell(space), TOLERANCE_MM, () => {});
  const { bodies } = cutExactly(gridTree(grid), {
    mesh,
    spaces: [space],
    triangulate: solids.triangulate,
    toleranceMm: TOLERANCE_MM,
    onStep: () => {},
  });
  const task = { spaces: [space], overhangDegrees: 45, columns: COLUMNS, tries: TRIES };
  let gridUprightMm3 = 0;
  let gridBestMm3 = 0;
  for (const body of bodies) {
    const upright = supportOn(body.mesh, [0, 0, -1], task);
    gridUprightMm3 += upright;
    gridBestMm3 += Math.min(upright, leastSupport(body.mesh, task)?.supportMm3 ?? upright);
  }
  return { gridUprightMm3, gridBestMm3 };
}

await run();
