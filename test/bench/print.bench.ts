import { execFileSync } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { DoubleSide, Ray, Vector3 } from 'three';
import { applyTree, countCuts } from '../../shared/geometry/cutting/apply-tree.js';
import { columnSupport } from '../../shared/geometry/support/column-support.js';
import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { writeStl } from '../../workers/export/stl-writer.js';
import { buildBvh } from '../../workers/measuring/triangle-bvh.js';
import { loadSolids } from '../../workers/solids/solid-kernel.js';
import { jointed } from '../support/jointed.js';
import { torusKnot } from '../support/shapes.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { benchKnot, benchTree } from './support/knot-case.js';
import { timeInTurn, timeRuns } from './support/stopwatch.js';

const PITCH_MM = 1;
const RAYS_LIMIT = 1 / 20;
const JOINTS_LIMIT = 2;
const WHOLE_LIMIT_S = 30;
const MEMORY_LIMIT_MB = 2048;

/** Support of one orientation, joints and marks against the cut, and a whole job, at the limits of issue size. */
export async function bench(): Promise<BenchTable> {
  const support = await supportAgainstRays();
  const joints = await jointsAgainstCut();
  const whole = await wholeJob();
  return {
    title: 'Print-ready pieces',
    columns: ['what', 'ours', 'against', 'ratio', 'note'],
    rows: [
      [
        'support of a 100,000-triangle piece, 1 mm columns, ms',
        support.ours,
        support.rays,
        support.ratio,
        `tree and rays of three-mesh-bvh; volumes differ by ${(100 * support.difference).toFixed(2)} %`,
      ],
      [
        'joints, marks, bevels of a 1,000,000-triangle knot, ms',
        joints.ours,
        joints.cut,
        joints.ratio,
        `${joints.pieces} pieces, ${joints.seams} seams, ${joints.cuts} cuts`,
      ],
      [
        'whole job, STL to ZIP, 1,000,000 triangles, s',
        whole.seconds,
        '',
        '',
        `${whole.pieces} pieces, ${whole.failed} failed checks, peak ${whole.peakMb.toFixed(0)} MB`,
      ],
    ],
    targets: [
      atMost('support against rays', support.ratio, RAYS_LIMIT),
      atMost('joints and marks against the cut', joints.ratio, JOINTS_LIMIT),
      atMost('whole job, s', whole.seconds, WHOLE_LIMIT_S),
      atMost('whole job, peak MB', whole.peakMb, MEMORY_LIMIT_MB),
      atMost('failed checks of the whole job', whole.failed, 0),
    ],
  };
}

async function supportAgainstRays() {
  // A knot within an envelope: 100,000 triangles.
  const mesh = torusKnot(33, 15, 1250, 40);
  const built = await timeRuns(3, () => buildBvh(mesh));
  const bvh = built.result;
  const question = { mesh, up: [0, 0, 1] as const, pitchMm: PITCH_MM, overhangDegrees: 45 };
  const [ours, rays] = await timeInTurn(5, [5, () => columnSupport(question).volumeMm3], () =>
    supportByRays(mesh, bvh),
  );
  return {
    ours: ours.medianMs,
    rays: rays.medianMs + built.medianMs,
    ratio: ours.medianMs / (rays.medianMs + built.medianMs),
    difference: Math.abs(ours.result / rays.result - 1),
  };
}

/** The same columns by rays through a tree: every hit of a column, sorted by height. */
function supportByRays(mesh: TriangleMesh, bvh: ReturnType<typeof buildBvh>): number {
  const { min, max } = boundingBox(mesh.positions);
  const lean = Math.sin(Math.PI / 4);
  const ray = new Ray(new Vector3(), new Vector3(0, 0, 1));
  const normal = new Float64Array(3);
  let gaps = 0;
  for (let y = min[1] + PITCH_MM / 2; y < max[1]; y += PITCH_MM)
    for (let x = min[0] + PITCH_MM / 2; x < max[0]; x += PITCH_MM) {
      ray.origin.set(x, y, min[2] - 1);
      const hits = bvh.raycast(ray, DoubleSide).sort((a, b) => a.distance - b.distance);
      let top = min[2];
      for (const { point, faceIndex } of hits) {
        facetNormal(mesh.positions, mesh.indices, 3 * faceIndex!, normal, 0);
        if (normal[2]! < -lean) gaps += point.z - top;
        if (normal[2]! > 0) top = point.z;
      }
    }
  return gaps * PITCH_MM * PITCH_MM;
}

async function jointsAgainstCut() {
  const solids = await loadSolids();
  const mesh = benchKnot(2500, 200);
  // 20 pieces.
  const tree = benchTree(3);
  const cut = await timeRuns(3, () =>
    applyTree(mesh, tree, { triangulate: solids.triangulate, toleranceMm: 0.02 }),
  );
  const both = await timeRuns(3, () => {
    const made = jointed(solids, mesh, tree);
    for (const { name } of made.plain) made.dress(name);
    return { pieces: made.plain.length, seams: made.seams.length };
  });
  // What is made with joints was cut as well.
  const ours = both.medianMs - cut.medianMs;
  return {
    ours,
    cut: cut.medianMs,
    ratio: ours / cut.medianMs,
    cuts: countCuts(tree),
    ...both.result,
  };
}

async function wholeJob() {
  const folder = await mkdtemp(join(tmpdir(), 'seamwright-bench-'));
  try {
    const mesh = benchKnot(2500, 200);
    const path = join(folder, 'knot.stl');
    const file = { positions: Float32Array.from(mesh.positions), indices: mesh.indices };
    await writeFile(path, writeStl(file, 'bench knot'));
    const child = fileURLToPath(new URL('./support/whole-job-child.ts', import.meta.url));
    const out = execFileSync(process.execPath, ['--import', 'tsx', child, path], {
      encoding: 'utf8',
      maxBuffer: 1e7,
    });
    return JSON.parse(out) as {
      seconds: number;
      peakMb: number;
      pieces: number;
      failed: number;
    };
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}
