import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { gridCell } from '../../shared/geometry/fitting/space-measures.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { bestExactGrid, gridTree } from '../../workers/planning/exact-grids.js';
import { cutExactly } from '../../workers/planning/exact-plan.js';
import { choosePlan, type PlanChoice } from '../../workers/planning/choose-plan.js';
import { leastSupport, supportOn } from '../../workers/planning/judging/body-support.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { type PlanModel, planModels } from './support/plan-models.js';

const TOLERANCE_MM = 0.02;
const COLUMNS = 90;
const TRIES = 5;
/** Support that counts as none when ratios are made, mm³: 1 cm³ a plan. */
const NO_SUPPORT_MM3 = 1000;

const box = (widthMm: number, depthMm: number, heightMm: number): BuildSpace => ({
  shape: 'rectangular',
  widthMm,
  depthMm,
  heightMm,
});
const SPACES = [box(220, 220, 250), box(180, 180, 180), box(300, 300, 300)];

interface GridSupport {
  readonly uprightMm3: number;
  readonly bestMm3: number;
}

/**
 * Every model in every envelope with the usual wishes, against the best axis grid of the same
 * envelope: pieces after the exact cut, and support of the grid's pieces as they stand in the model
 * and each in its own best orientation, by the same columns.
 */
export async function bench(): Promise<BenchTable> {
  const solids = await loadSolids();
  const rows: (string | number)[][] = [];
  const seen: { model: PlanModel; choice: PlanChoice; grid: GridSupport; setMs: number }[] = [];
  for (const model of planModels(solids)) {
    const mesh = model.make();
    for (const space of SPACES) {
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
      const grid = gridSupport(mesh, space, solids);
      seen.push({ model, choice, grid, setMs });
      const { objectives } = choice.figures;
      rows.push([
        model.name,
        space.shape === 'rectangular' ? `${space.widthMm}×${space.depthMm}×${space.heightMm}` : '',
        objectives.pieces,
        Math.min(...choice.offers.map((offer) => offer.objectives.pieces)),
        choice.bounds.gridPieces,
        choice.bounds.pieces,
        Math.round(objectives.supportMm3 / 1000),
        Math.round(Math.min(...choice.offers.map((o) => o.objectives.supportMm3)) / 1000),
        Math.round(grid.bestMm3 / 1000),
        Math.round(grid.uprightMm3 / 1000),
        choice.offers.length,
        Math.round(choice.firstPlanMs),
        Math.round(setMs),
      ]);
    }
  }
  const curved = seen.filter(({ model }) => model.family === 'organic' || model.family === 'shell');
  const smallSets = seen.filter(({ choice }) => choice.bodies.length <= 30);
  const supportRatio = (of: (grid: GridSupport) => number) =>
    geometricMean(
      seen
        .filter(({ grid }) => of(grid) > NO_SUPPORT_MM3)
        .map(
          ({ choice, grid }) =>
            Math.max(NO_SUPPORT_MM3, choice.figures.objectives.supportMm3) / of(grid),
        ),
    );
  return {
    title: 'Plans of 15 models in 3 envelopes, the usual wishes, against the best axis grid',
    columns: [
      'model',
      'envelope',
      'pieces',
      'fewest',
      'grid',
      'bound',
      'support cm³',
      'least',
      'grid, best laid',
      'grid, upright',
      'offers',
      'first ms',
      'set ms',
    ],
    rows,
    targets: [
      atMost(
        'models with more pieces than the grid',
        seen.filter(({ choice }) => choice.bodies.length > choice.bounds.gridPieces).length,
        0,
      ),
      atMost(
        'pieces against the grid, organic and shells, geometric mean',
        geometricMean(curved.map(({ choice: c }) => c.bodies.length / c.bounds.gridPieces)),
        0.75,
      ),
      atMost(
        'support against the grid upright, geometric mean',
        supportRatio((grid) => grid.uprightMm3),
        0.2,
      ),
      atMost(
        'support against the grid best laid, geometric mean',
        supportRatio((grid) => grid.bestMm3),
        0.5,
      ),
      atMost(
        'plans below their bound',
        seen.filter(({ choice: c }) =>
          c.offers.some((offer) => offer.objectives.pieces < c.bounds.pieces),
        ).length,
        0,
      ),
      atMost(
        'first plan, the slowest, ms',
        Math.max(...seen.map((s) => s.choice.firstPlanMs)),
        2000,
      ),
      atMost(
        'whole set up to 30 pieces, the slowest, ms',
        Math.max(...smallSets.map(({ setMs }) => setMs)),
        20_000,
      ),
      atMost('peak of the process, MB', process.resourceUsage().maxRSS / 1024, 500),
    ],
  };
}

function gridSupport(mesh: TriangleMesh, space: BuildSpace, solids: Solids): GridSupport {
  const { grid } = bestExactGrid(mesh, gridCell(space), TOLERANCE_MM, () => {});
  const { bodies } = cutExactly(gridTree(grid), {
    mesh,
    spaces: [space],
    triangulate: solids.triangulate,
    toleranceMm: TOLERANCE_MM,
    onStep: () => {},
  });
  const task = { spaces: [space], overhangDegrees: 45, columns: COLUMNS, tries: TRIES };
  let uprightMm3 = 0;
  let bestMm3 = 0;
  for (const body of bodies) {
    const upright = supportOn(body.mesh, [0, 0, -1], task);
    uprightMm3 += upright;
    bestMm3 += Math.min(upright, leastSupport(body.mesh, task)?.supportMm3 ?? upright);
  }
  return { uprightMm3, bestMm3 };
}

function geometricMean(ratios: readonly number[]): number {
  return Math.exp(ratios.reduce((sum, ratio) => sum + Math.log(ratio), 0) / ratios.length);
}
