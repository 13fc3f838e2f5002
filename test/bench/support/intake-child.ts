// Inspects the files named on the command line one after another and prints a line of JSON for each.
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import { loadSolids } from '../../../workers/solids/solid-kernel.js';
import { hasAdmesh } from '../../support/admesh.js';
import { inspectSayingYes, judgeSolid } from '../../support/intake-outcome.js';

/** One file's line of the table. */
export interface IntakeLine {
  readonly file: string;
  readonly end: string;
  readonly decisions: readonly string[];
  readonly steps: readonly string[];
  readonly reason: string | null;
  readonly volumeBefore: number;
  readonly volumeAfter: number;
  readonly triangles: number;
  readonly deviation: number | null;
  readonly manifold: string;
  readonly admeshOpen: number | null;
  readonly writtenFaults: number;
  readonly seconds: number;
}

const solids = await loadSolids();
const isAdmeshThere = hasAdmesh();
for (const path of process.argv.slice(2)) {
  const start = performance.now();
  const file = basename(path);
  const { end, decisions, reason, inspection } = inspectSayingYes(
    new Uint8Array(readFileSync(path)),
    file,
    solids,
  );
  const seconds = (performance.now() - start) / 1000;
  const report = inspection?.report;
  const opinion =
    end === 'solid' && inspection?.solid && report
      ? await judgeSolid(
          inspection.solid,
          [0, 1, 2].map((k) => report.min[k]! + report.size[k]! / 2) as [number, number, number],
          isAdmeshThere,
        )
      : null;
  const line: IntakeLine = {
    file,
    end,
    decisions,
    steps: report?.mending.map(({ kind, count }) => `${kind} ${count}`) ?? [],
    reason,
    volumeBefore: report?.asRead.volume ?? 0,
    volumeAfter: report?.volume ?? 0,
    triangles: report?.triangles ?? 0,
    deviation: report?.remeshDeviation?.p95 ?? null,
    manifold: opinion?.manifold ?? '',
    admeshOpen: opinion?.admeshOpen ?? null,
    writtenFaults: opinion?.writtenFaults ?? 0,
    seconds,
  };
  process.stdout.write(`${JSON.stringify(line)}\n`);
}
