// Inspects a large model as the job does, and has manifold-3d import it, in turn, and prints the times.
import { parseArgs } from 'node:util';
import { encodeMesh } from '../../../workers/intake/mesh-file.js';
import { inspectFile } from '../../../workers/inspecting/inspect-file.js';
import { pictureInspection } from '../../../workers/inspecting/picture-inspection.js';
import { readModel } from '../../../workers/intake/model-reader.js';
import { loadSolids } from '../../../workers/solids/solid-kernel.js';
import { toSoup } from '../../support/shapes.js';
import { binaryStl } from '../../support/stl-files.js';
import { benchKnot } from './knot-case.js';

const { values } = parseArgs({ options: { turns: { type: 'string' }, first: { type: 'string' } } });
const solids = await loadSolids();
const bytes = binaryStl(toSoup(benchKnot(2500, 200)));
const welded = readModel(bytes, 'knot.stl').mesh;
const stages: [string, number][] = [];
let peakMb = 0;

async function inspect(): Promise<number> {
  const start = performance.now();
  stages.length = 0;
  let stage = 'Start';
  let since = start;
  const context = {
    throwIfCancelled: () => {},
    progress: (next: string) => {
      if (next === stage) return;
      const now = performance.now();
      stages.push([stage, now - since]);
      [stage, since] = [next, now];
    },
  };
  const inspection = inspectFile({ bytes, fileName: 'knot.stl' }, { solids, context });
  const { proxy } = await pictureInspection(inspection, context);
  encodeMesh(inspection.solid!);
  if (!proxy) throw new Error('The proxy is not closed.');
  encodeMesh(proxy);
  const end = performance.now();
  stages.push([stage, end - since]);
  peakMb = Math.max(peakMb, process.memoryUsage().rss / 1024 ** 2);
  return end - start;
}

function importIt(): number {
  const start = performance.now();
  solids.withSolids(({ Manifold, Mesh, keep }) => {
    const vertProperties = new Float32Array(welded.positions);
    const solid = keep(
      new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: welded.indices })),
    );
    return solid.volume();
  });
  return performance.now() - start;
}

const inspectMs: number[] = [];
const importMs: number[] = [];
for (let turn = 0; turn < Number(values.turns ?? 1); turn++) {
  if (values.first === 'import') importMs.push(importIt());
  inspectMs.push(await inspect());
  if (values.first !== 'import') importMs.push(importIt());
}
process.stdout.write(JSON.stringify({ inspectMs, importMs, stages, peakMb }));
