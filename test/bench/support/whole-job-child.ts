import { createWriteStream } from 'node:fs';
import { mkdtemp, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ZipArchive } from 'archiver';
import { planModel } from '../../../workers/cli/plan-model.js';
import { silentContext } from '../../../workers/runtime/job-context.js';

/**
 * One whole job in a process of its own, from an STL to a ZIP of proven pieces; prints JSON: seconds,
 * peak memory, pieces and failed checks.
 */
const [, , modelPath] = process.argv;
const folder = await mkdtemp(join(tmpdir(), 'seamwright-whole-'));
const start = performance.now();
const outFolder = join(folder, 'out');
const report = await planModel(
  {
    modelPath: modelPath!,
    spaces: [{ shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 }],
    wishesPath: null,
    jointsPath: null,
    material: null,
    seed: 1,
    millimetresPerUnit: 1,
    fillHolesUpToMm: null,
    remeshCells: null,
    parts: null,
    accept: false,
    outFolder,
  },
  silentContext,
);
const zipPath = join(folder, 'pieces.zip');
await new Promise<void>((resolve, reject) => {
  const archive = new ZipArchive({ zlib: { level: 1 } });
  const file = createWriteStream(zipPath);
  file.once('close', () => resolve());
  archive.once('error', reject);
  archive.pipe(file);
  archive.directory(outFolder, false);
  void archive.finalize();
});
const seconds = (performance.now() - start) / 1000;
const { size } = await stat(zipPath);
await rm(folder, { recursive: true, force: true });
process.stdout.write(
  JSON.stringify({
    seconds,
    peakMb: process.resourceUsage().maxRSS / 1024,
    pieces: report.pieces.length,
    failed: report.proof.filter((row) => !row.passed).length,
    zipMb: size / 1024 / 1024,
    timings: report.timingsMs,
  }),
);
