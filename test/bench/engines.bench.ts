import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { toSoup } from '../support/shapes.js';
import { loadManifold } from '../support/triangulator.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { cutWithCsg, cutWithKernel, cutWithManifold, manifoldSoups } from './support/engines.js';
import { benchKnot, benchTree } from './support/knot-case.js';
import { timeRuns } from './support/stopwatch.js';
import { inspectSoups } from './support/written-faults.js';

const RUNS = 3;
const REACH_MM = 1000;

/** The three engines on the same cuts: how fast, and what a file of their pieces is worth. */
export async function bench(): Promise<BenchTable> {
  const module = await loadManifold();
  const mesh = benchKnot(800, 125);
  const tree = benchTree();
  const whole = signedVolume(mesh);
  const positions = Float32Array.from(mesh.positions);

  const kernel = await timeRuns(RUNS, () => cutWithKernel(module, mesh, tree));
  const kernelSoups = kernel.result.map((body) => toSoup(body.mesh));

  const solids = await timeRuns(RUNS, () => {
    const leaves = cutWithManifold(module, positions, mesh.indices, tree);
    const soups = manifoldSoups(leaves);
    leaves.forEach((leaf) => leaf.delete());
    return soups;
  });
  // Its tree builder warns of a renamed option at every brush; that says nothing about the cuts.
  const { warn } = console;
  console.warn = () => {};
  const csg = await timeRuns(RUNS, () => cutWithCsg(mesh, tree, REACH_MM));
  console.warn = warn;

  const row = (engine: string, medianMs: number, soups: readonly Float32Array[]) => {
    const faults = inspectSoups(soups);
    const volumeError = Math.abs(faults.volumeMm3 / whole - 1);
    return [engine, medianMs, faults.openHalfEdges, volumeError, faults.triangles] as const;
  };
  const rows = [
    row('kernel', kernel.medianMs, kernelSoups),
    row('manifold-3d', solids.medianMs, solids.result),
    row('three-bvh-csg', csg.medianMs, csg.result),
  ];
  return {
    title: 'Engines on the same 15 cuts: torus knot, 200,000 triangles',
    columns: ['engine', 'median ms', 'open half-edges as written', 'volume error', 'triangles'],
    rows,
    targets: [
      atMost('open half-edges of the kernel', rows[0]![2], 0),
      atMost('volume error of the kernel as written', rows[0]![3], 1e-6),
    ],
  };
}
