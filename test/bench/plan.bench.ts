import { execFileSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { loadSolids } from '../../workers/solids/solid-kernel.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { type PlanCase, type PlanChildAnswer } from './support/plan-child.js';
import { planModels } from './support/plan-models.js';

const child = fileURLToPath(new URL('support/plan-child.ts', import.meta.url));
/** Support that counts as none when ratios are made, mm³: 1 cm³ a plan. */
const NO_SUPPORT_MM3 = 1000;

/**
 * Every model in every envelope with the usual wishes, against the best axis grid of the same
 * envelope: pieces after the exact cut, and support of the grid's pieces as they stand in the model
 * and each in its own best orientation, by the same columns.
 */
export async function bench(): Promise<BenchTable> {
  const solids = await loadSolids();
  const answers = planModels(solids).map((_, number) => runChild(number));
  const all = answers.flatMap(({ cases }) => cases);
  const curved = answers
    .filter(({ family }) => family === 'organic' || family === 'shell')
    .flatMap(({ cases }) => cases);
  const supportRatio = (of: (one: PlanCase) => number) =>
    geometricMean(
      all
        .filter((one) => of(one) > NO_SUPPORT_MM3)
        .map((one) => Math.max(NO_SUPPORT_MM3, one.supportMm3) / of(one)),
    );
  const slowest = (of: (one: PlanCase) => number) =>
    Math.max(...all.filter((one) => one.pieces <= 30).map(of));
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
    rows: answers.flatMap(({ name, cases }) => cases.map((one) => [name, ...rowOf(one)])),
    targets: [
      atMost(
        'plans with more pieces than the grid',
        all.filter((one) => one.offers.some(({ pieces }) => pieces > one.gridPieces)).length,
        0,
      ),
      atMost(
        'pieces against the grid, organic and shells, geometric mean',
        geometricMean(curved.map((one) => one.pieces / one.gridPieces)),
        0.75,
      ),
      atMost(
        'support against the grid upright, geometric mean',
        supportRatio((one) => one.gridUprightMm3),
        0.2,
      ),
      atMost(
        'support against the grid best laid, geometric mean',
        supportRatio((one) => one.gridBestMm3),
        0.5,
      ),
      atMost(
        'plans below their bound',
        all.filter((one) => one.offers.some(({ pieces }) => pieces < one.bound)).length,
        0,
      ),
      atMost(
        'first plan, the slowest, ms',
        slowest((one) => one.firstMs),
        2000,
      ),
      atMost(
        'whole set up to 30 pieces, the slowest, ms',
        slowest((one) => one.setMs),
        20_000,
      ),
      atMost('peak of a process, MB', Math.max(...answers.map(({ peakMb }) => peakMb)), 500),
    ],
  };
}

function rowOf(one: PlanCase): (string | number)[] {
  const cm3 = (mm3: number) => Math.round(mm3 / 1000);
  return [
    one.space,
    one.pieces,
    Math.min(...one.offers.map(({ pieces }) => pieces)),
    one.gridPieces,
    one.bound,
    cm3(one.supportMm3),
    cm3(Math.min(...one.offers.map(({ supportMm3 }) => supportMm3))),
    cm3(one.gridBestMm3),
    cm3(one.gridUprightMm3),
    one.offers.length,
    Math.round(one.firstMs),
    Math.round(one.setMs),
  ];
}

function runChild(number: number): PlanChildAnswer {
  const answer = execFileSync(process.execPath, ['--import', 'tsx', child, String(number)], {
    encoding: 'utf8',
    maxBuffer: 1 << 24,
  });
  return JSON.parse(answer) as PlanChildAnswer;
}

function geometricMean(ratios: readonly number[]): number {
  return Math.exp(ratios.reduce((sum, ratio) => sum + Math.log(ratio), 0) / ratios.length);
}
