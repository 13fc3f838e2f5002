import { execFileSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { atMost, type BenchTable } from './support/bench-table.js';
import { median } from './support/stopwatch.js';

const inspectChild = fileURLToPath(new URL('support/inspect-child.ts', import.meta.url));
const memoryChild = fileURLToPath(new URL('support/weld-memory-child.ts', import.meta.url));
/** Twice the time that manifold-3d needs to import the mesh. */
const LIMIT = 2;
const MOST_BYTES = 60;
const FRESH = 3;
const TURNS = 9;

interface Times {
  readonly inspectMs: number[];
  readonly importMs: number[];
  readonly stages: [string, number][];
  readonly peakMb: number;
}

/**
 * The whole inspection of 1,000,000 triangles, all but writing its files, against manifold-3d's import
 * of the welded mesh: in fresh processes, as the command line runs, where both compile as they go; and
 * in one that has done it before, as a worker that has been up for a while. And the memory of reading
 * and welding 6,000,000.
 */
export async function bench(): Promise<BenchTable> {
  const fresh = Array.from({ length: FRESH }, (_, i) =>
    run<Times>(inspectChild, ['--turns=1', `--first=${i % 2 === 0 ? 'inspect' : 'import'}`]),
  );
  const warm = run<Times>(inspectChild, [`--turns=${TURNS}`]);
  const freshInspect = median(fresh.map((one) => one.inspectMs[0]!));
  const freshImport = median(fresh.map((one) => one.importMs[0]!));
  const warmInspect = median(warm.inspectMs.slice(1));
  const warmImport = median(warm.importMs.slice(1));
  const memory = run<{ facets: number; bytesAFacet: number; ms: number }>(memoryChild, []);
  return {
    title: 'Inspecting 1,000,000 triangles, and reading 6,000,000',
    columns: ['what', 'ms', 'of manifold-3d'],
    rows: [
      ['inspection, fresh process', freshInspect, freshInspect / freshImport],
      ['manifold-3d import, fresh process', freshImport, 1],
      ['inspection, warm', warmInspect, warmInspect / warmImport],
      ['manifold-3d import, warm', warmImport, 1],
      ...warm.stages.map(([stage, ms]) => [`  ${stage}`, ms, ms / warmImport]),
      [`peak of the process, MB: ${Math.round(warm.peakMb)}`, '', ''],
      [`reading and welding ${memory.facets} facets`, memory.ms, ''],
    ],
    targets: [
      atMost('inspection against import, fresh process', freshInspect / freshImport, LIMIT),
      atMost('inspection against import, warm', warmInspect / warmImport, LIMIT),
      atMost('bytes a facet beside the file', memory.bytesAFacet, MOST_BYTES),
    ],
  };
}

function run<T>(file: string, words: readonly string[]): T {
  const answer = execFileSync(
    process.execPath,
    ['--expose-gc', '--max-old-space-size=8192', '--import', 'tsx', file, ...words],
    { encoding: 'utf8', maxBuffer: 1 << 24 },
  );
  return JSON.parse(answer) as T;
}
