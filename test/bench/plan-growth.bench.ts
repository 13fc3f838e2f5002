import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { choosePlan } from '../../workers/planning/choose-plan.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import { loadManifold, manifoldTriangulator } from '../support/triangulator.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { benchKnot } from './support/knot-case.js';
import { median } from './support/stopwatch.js';

const RUNS = 3;
const SIZES = [
  { along: 625, around: 40 },
  { along: 1250, around: 80 },
  { along: 2500, around: 200 },
] as const;
const FIRST_LIMIT_MS = 2_000;
const SET_LIMIT_MS = 20_000;
/** The search works on a proxy: five times the triangles may cost little more. */
const GROWTH_LIMIT = 1.5;

/** The plans of torus knots of the same shape in 220 × 220 × 250 mm. */
export async function bench(): Promise<BenchTable> {
  const triangulate = manifoldTriangulator(await loadManifold());
  const rows = SIZES.map(({ along, around }) => {
    const mesh = benchKnot(along, around);
    const firsts: number[] = [];
    const searches: number[] = [];
    const cuts: number[] = [];
    let pieces = 0;
    let gridPieces = 0;
    for (let run = 0; run < RUNS; run++) {
      const choice = choosePlan({
        mesh,
        spaces: [{ shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 }],
        wishes: usualWishes,
        seed: 1,
        triangulate,
        toleranceMm: 0.02,
        context: silentContext,
      });
      firsts.push(choice.firstPlanMs);
      searches.push(choice.searchMs);
      cuts.push(choice.cutMs);
      pieces = choice.bodies.length;
      gridPieces = choice.bounds.gridPieces;
    }
    return [
      2 * along * around,
      median(firsts),
      median(searches),
      median(cuts),
      pieces,
      gridPieces,
    ] as const;
  });
  const [, middle, large] = rows;
  return {
    title: 'Plans of a torus knot in 220 × 220 × 250 mm, by its triangles',
    columns: [
      'triangles',
      'first plan ms',
      'search ms',
      'exact cuts ms',
      'pieces',
      'best axis grid',
    ],
    rows: rows.map((row) => [...row]),
    targets: [
      atMost('first plan for 1,000,000 triangles, ms', large![1], FIRST_LIMIT_MS),
      atMost(
        'all plans, cut exactly, for 1,000,000 triangles, ms',
        large![2] + large![3],
        SET_LIMIT_MS,
      ),
      atMost(
        'search for 1,000,000 against 200,000 triangles',
        large![2] / middle![2],
        GROWTH_LIMIT,
      ),
    ],
  };
}
