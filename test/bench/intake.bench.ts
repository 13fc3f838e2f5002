import { spawn } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { atMost, type BenchTable } from './support/bench-table.js';
import type { IntakeLine } from './support/intake-child.js';

/** Open test meshes that lie beside the repository on some machines; never copied into it. */
const folder = fileURLToPath(new URL('../../../shared/meshes/stl', import.meta.url));
const child = fileURLToPath(new URL('support/intake-child.ts', import.meta.url));
const longestSeconds = 60;
const longestReason = 70;

/** Every open test mesh through the intake, with every question answered by yes. */
export async function bench(): Promise<BenchTable> {
  const files = existsSync(folder)
    ? readdirSync(folder)
        .filter((name) => name.endsWith('.stl'))
        .sort()
        .map((name) => join(folder, name))
    : [];
  if (files.length === 0) console.log('Skipped: the open test meshes are not on this machine.');
  const lines = await inspectAll(files);
  const solid = lines.filter((line) => line.end === 'solid');
  const lost = lines.filter((line) => line.end !== 'solid' && line.end !== 'refused').length;
  return {
    title: `Intake of ${files.length} open test meshes: ${solid.length} solids, ${lines.length - solid.length - lost} refused with a reason`,
    columns: ['file', 'end', 'decided', 'done', 'volume', 'manifold-3d', 'admesh', 'written', 's'],
    rows: lines.map((line) => [
      line.file.replace(/\.stl$/, ''),
      line.end,
      line.decisions.join(', ') || '–',
      line.end === 'solid' ? line.steps.join(', ') || '–' : shortened(line.reason ?? ''),
      line.end === 'solid' ? changeOf(line) : '–',
      line.manifold || '–',
      line.admeshOpen === null ? '–' : line.admeshOpen,
      line.end === 'solid' ? line.writtenFaults : '–',
      line.seconds,
    ]),
    targets: [
      atMost('files that crashed or took over 60 s', lost, 0),
      atMost('longest, s', Math.max(0, ...lines.map((line) => line.seconds)), longestSeconds),
      atMost(
        'solids that manifold-3d does not take',
        solid.filter((line) => line.manifold !== 'NoError').length,
        0,
      ),
      atMost(
        'solids with facets that admesh finds disconnected',
        solid.filter((line) => (line.admeshOpen ?? 0) > 0).length,
        0,
      ),
      atMost(
        'solids whose written STL has a faulty edge',
        solid.filter((line) => line.writtenFaults > 0).length,
        0,
      ),
      atMost(
        'refusals without a sentence',
        lines.filter((line) => line.end === 'refused' && !/\S.*[.?]$/.test(line.reason ?? ''))
          .length,
        0,
      ),
    ],
  };
}

/** Without the file's name, and not so long that the table gets out of hand. */
function shortened(reason: string): string {
  const bare = reason.replace(/^“[^”]*” /, '');
  return bare.length <= longestReason ? bare : `${bare.slice(0, longestReason - 1)}…`;
}

function changeOf({ volumeBefore, volumeAfter }: IntakeLine): string {
  const percent = 100 * (volumeAfter / volumeBefore - 1);
  return Math.abs(percent) < 0.005 ? '=' : `${percent > 0 ? '+' : ''}${percent.toFixed(2)} %`;
}

/** Goes on with the next file in a new process when one crashes or takes too long. */
async function inspectAll(files: readonly string[]): Promise<IntakeLine[]> {
  const lines: IntakeLine[] = [];
  while (lines.length < files.length) {
    const end = await inspectFrom(files, lines);
    if (lines.length < files.length) lines.push(lostLine(files[lines.length]!, end));
  }
  return lines;
}

function inspectFrom(files: readonly string[], lines: IntakeLine[]): Promise<string> {
  return new Promise((resolve) => {
    const worker = spawn(
      process.execPath,
      ['--import', 'tsx', child, ...files.slice(lines.length)],
      { stdio: ['ignore', 'pipe', 'inherit'] },
    );
    let end = 'crashed';
    const watch = () =>
      setTimeout(() => {
        end = 'too long';
        worker.kill('SIGKILL');
      }, longestSeconds * 1000);
    let timer = watch();
    createInterface({ input: worker.stdout }).on('line', (text) => {
      clearTimeout(timer);
      timer = watch();
      lines.push(JSON.parse(text) as IntakeLine);
    });
    worker.once('close', () => {
      clearTimeout(timer);
      resolve(end);
    });
  });
}

function lostLine(file: string, end: string): IntakeLine {
  return {
    file: file.split('/').at(-1)!,
    end,
    decisions: [],
    steps: [],
    reason: null,
    volumeBefore: 0,
    volumeAfter: 0,
    triangles: 0,
    deviation: null,
    manifold: '',
    admeshOpen: null,
    writtenFaults: 0,
    seconds: longestSeconds,
  };
}
