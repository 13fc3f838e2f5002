import { type PlanReport } from './plan-report.js';

/** The report as text for a terminal: what was planned, pieces, seams, proof, times. */
export function showTables(
  modelName: string,
  report: PlanReport,
  outFolder: string | null,
): string {
  const { model, mending, pieces, seams, proof, bounds, plans, timingsMs } = report;
  const size = model.sizeMm.map((side) => side.toFixed(1)).join(' × ');
  const times = Object.entries(timingsMs).map(([step, ms]) => `${step} ${Math.round(ms)} ms`);
  const sections = [
    `${modelName}: ${size} mm, ${model.triangles} triangles, ${cm3(model.volumeMm3)} cm³`,
    ...(mending.length > 0 ? [mending.map((step) => `- ${step.sentence}`).join('\n')] : []),
    `${counted(pieces.length, 'piece')} (no plan can have fewer than ${bounds.pieces})`,
    ...(plans.length > 1 ? [offersTable(plans)] : []),
    table(
      ['piece', 'size on the bed, mm', 'volume, cm³', 'triangles', 'fits'],
      pieces.map((piece) => [
        piece.name,
        piece.sizeMm.map((side) => side.toFixed(2)).join(' × '),
        cm3(piece.volumeMm3),
        String(piece.triangles),
        piece.fits ? 'yes' : 'NO',
      ]),
    ),
    seams.length === 0
      ? 'No seams.'
      : table(
          ['seam', 'area, cm²'],
          seams.map((seam) => [seam.between.join(' + '), (seam.areaMm2 / 100).toFixed(2)]),
        ),
    table(
      ['proof', 'measured', 'limit', 'passed'],
      proof.map((row) => [row.check, row.measured, row.limit, row.passed ? 'yes' : 'NO']),
    ),
    `${times.join(', ')}; peak memory ${Math.round(report.peakMemoryMb)} MB`,
    outFolder === null
      ? 'Nothing was kept: give --out DIR to keep the pieces.'
      : `The pieces are in ${outFolder}.`,
  ];
  return sections.join('\n\n') + '\n';
}

function offersTable(plans: PlanReport['plans']): string {
  return table(
    ['plan', 'pieces', 'support, cm³', 'seam in sight, mm', 'weakest seam, kPa', 'best at'],
    plans.map(({ isMade, objectives, bestAt }, k) => [
      `${k + 1}${isMade ? ' (made)' : ''}`,
      String(objectives.pieces),
      cm3(objectives.supportMm3),
      objectives.visibleSeamMm.toFixed(0),
      objectives.weakestSeamKpa.toFixed(1),
      bestAt.join(', '),
    ]),
  );
}

function cm3(mm3: number): string {
  return (mm3 / 1000).toFixed(2);
}

function counted(count: number, one: string): string {
  return `${count} ${one}${count === 1 ? '' : 's'}`;
}

/** Columns padded to their widest cell, a line under the head. */
function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const widths = head.map((title, column) =>
    Math.max(title.length, ...rows.map((row) => row[column].length)),
  );
  const line = (cells: readonly string[]) =>
    cells
      .map((cell, column) => cell.padEnd(widths[column]))
      .join('  ')
      .trimEnd();
  return [line(head), widths.map((width) => '-'.repeat(width)).join('  '), ...rows.map(line)].join(
    '\n',
  );
}
