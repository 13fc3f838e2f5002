import { loadManifold } from '../support/triangulator.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { cutWithKernel, cutWithManifold } from './support/engines.js';
import { benchKnot, benchTree } from './support/knot-case.js';
import { timeInTurn } from './support/stopwatch.js';

const TURNS = 5;
const RUNS_A_TURN = 3;
const LIMIT = 0.1;

/** Cutting a torus knot of 1,000,000 triangles on 4 levels: 15 cuts. */
export async function bench(): Promise<BenchTable> {
  const module = await loadManifold();
  const mesh = benchKnot(2500, 200);
  const tree = benchTree();
  const positions = Float32Array.from(mesh.positions);
  const [ours, theirs] = await timeInTurn(
    TURNS,
    [RUNS_A_TURN, () => cutWithKernel(module, mesh, tree).length],
    () => {
      const leaves = cutWithManifold(module, positions, mesh.indices, tree);
      leaves.forEach((leaf) => leaf.delete());
      return leaves.length;
    },
  );
  const ratio = ours.medianMs / theirs.medianMs;
  return {
    title: 'Cutting: torus knot, 1,000,000 triangles, 15 cuts on 4 levels',
    columns: ['engine', 'median ms', 'processor ms', 'of manifold-3d', 'pieces'],
    rows: [
      ['kernel: place, cut, take apart', ours.medianMs, ours.medianCpuMs, ratio, ours.result],
      [
        'manifold-3d: import, cut',
        theirs.medianMs,
        theirs.medianCpuMs,
        1,
        `${theirs.result} parts`,
      ],
    ],
    targets: [atMost('kernel against manifold-3d', ratio, LIMIT)],
  };
}
