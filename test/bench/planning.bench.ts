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
const SEARCH_LIMIT_MS = 5_000;
/** The search works on a proxy: five times the triangles may cost little more. */
const GROWTH_LIMIT = 1.5;

/** The first plan of torus knots of the same shape in 220 × 220 × 250 mm. */
export async function bench(): Promise<BenchTable> {
  const triangulate = manifoldTriangulator(await loadManifold());
  const rows = SIZES.map(({ along, around }) => {
    const mesh = benchKnot(along, around);
    const searches: number[] = [];
    const cuts: number[] = [];
    let pieces = 0;
    let gridPieces = 0;
    for (let run = 0; run < RUNS; run++) {
      const choice = choosePlan({
        mesh,
        space: { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 },
        seed: 1,
        triangulate,
        toleranceMm: 0.02,
        context: silentContext,
      });
      searches.push(choice.searchMs);
      cuts.push(choice.cutMs);
      pieces = choice.bodies.length;
      gridPieces = choice.bounds.gridPieces;
    }
    return [2 * along * around, median(searches), median(cuts), pieces, gridPieces] as const;
  });
  const [, middle, large] = rows;
  return {
    title: 'First plan: torus knot in 220 × 220 × 250 mm',
    columns: ['triangles', 'search ms', 'exact cuts ms', 'pieces', 'best axis grid'],
    rows: rows.map((row) => [...row]),
    targets: [
      atMost('search for 200,000 triangles, ms', middle![1], SEARCH_LIMIT_MS),
      atMost(
        'search for 1,000,000 against 200,000 triangles',
        large![1] / middle![1],
        GROWTH_LIMIT,
      ),
    ],
  };
}
