import { type MeshReport, type SurfaceState } from '../../../shared/jobs/model-inspect.js';
import { writeBytes, writeCount } from '../ui/format/quantities';

const kinds: Record<MeshReport['format'], string> = {
  'stl-binary': 'A binary STL',
  'stl-ascii': 'An STL written as text',
  obj: 'An OBJ file',
  '3mf': 'A 3MF file',
};

/** What the file is, told as a colleague would after looking it through. */
export function meshInWords(report: MeshReport): string {
  const unit = report.fileUnit ? `, unit ${report.fileUnit.name}` : '';
  const parts = report.parts.length > 1 ? ` in ${writeCount(report.parts.length)} parts` : '';
  const file = `${kinds[report.format]} of ${writeBytes(report.fileBytes)} with ${counted(report.facetsRead, 'facet')}${parts}${unit}.`;
  if (!report.closed) {
    return `${file} Its surface is not closed, so it has no inside that could be cut.`;
  }
  const bodies = report.shells - report.cavities;
  const solids = bodies === 1 ? 'one closed solid' : `${writeCount(bodies)} closed solids`;
  const hollows = report.cavities > 0 ? ` with ${counted(report.cavities, 'hollow')} inside` : '';
  const comes = report.mending.length > 0 ? 'Mended, it holds' : 'It holds';
  return `${file} ${comes} ${solids}${hollows}.`;
}

/** What was wrong with the surface as it came, one fault a line; nothing when it was in order. */
export function faultsInWords(report: MeshReport): readonly string[] {
  const { asRead } = report;
  const faults: string[] = [];
  const add = (count: number, one: string, many: string) => {
    if (count > 0) faults.push(count === 1 ? `One ${one}.` : `${writeCount(count)} ${many}.`);
  };
  add(report.holesFound, 'hole in the surface', 'holes in the surface');
  add(
    asRead.openEdges,
    'edge with a facet on one side only',
    'edges with a facet on one side only',
  );
  add(
    asRead.nonManifoldEdges,
    'edge shared by more than two facets',
    'edges shared by more than two facets',
  );
  add(
    asRead.misorientedEdges,
    'edge whose two facets disagree on what is outside',
    'edges whose two facets disagree on what is outside',
  );
  add(asRead.duplicateFacets, 'facet that repeats another', 'facets that repeat others');
  add(report.degenerateDropped, 'facet without area', 'facets without area');
  return faults;
}

/** One line of the comparison of before and after. */
export interface ChangeRow {
  readonly name: string;
  readonly before: string;
  readonly after: string;
  readonly change: string;
}

/** How the surface came and how it is now; lengths through the writers, which know the scale. */
export function changeRows(
  report: MeshReport,
  write: {
    readonly size: (size: readonly number[]) => string;
    readonly area: (area: number) => string;
    readonly volume: (volume: number) => string;
  },
): readonly ChangeRow[] {
  const { asRead } = report;
  const row = (
    name: string,
    pick: (state: SurfaceState) => number,
    show: (n: number) => string,
  ) => ({
    name,
    before: show(pick(asRead)),
    after: report.closed || name !== 'Volume' ? show(pick(report)) : '–',
    change: report.closed || name !== 'Volume' ? changeInWords(pick(asRead), pick(report)) : '',
  });
  return [
    row('Triangles', (state) => state.triangles, writeCount),
    row('Shells', (state) => state.shells, writeCount),
    row('Surface', (state) => state.area, write.area),
    row('Volume', (state) => state.volume, write.volume),
    {
      name: 'Size',
      before: write.size(asRead.size),
      after: write.size(report.size),
      change: sidesInWords(asRead.size, report.size),
    },
  ];
}

/** "+0.12 %", or "same"; changes too small for two decimals are said to be small. */
export function changeInWords(before: number, after: number): string {
  if (before === after) return 'same';
  if (before === 0) return '';
  const percent = 100 * (after / before - 1);
  if (Math.abs(percent) < 0.005) return 'under 0.01 %';
  return `${percent > 0 ? '+' : '−'}${Math.abs(percent).toFixed(2)} %`;
}

function sidesInWords(before: readonly number[], after: readonly number[]): string {
  const most = Math.max(...before.map((side, axis) => Math.abs(after[axis]! / (side || 1) - 1)));
  return most === 0 ? 'same' : most < 5e-5 ? 'under 0.01 %' : `up to ${(100 * most).toFixed(2)} %`;
}

/** Handles, told by what they look like. */
export function genusInWords(genus: number): string {
  if (genus === 0) return 'none: no opening goes right through';
  return genus === 1
    ? '1 opening right through it'
    : `${writeCount(genus)} openings right through it`;
}

/** How near the picture is to the model. */
export function proxyInWords(report: MeshReport, millimetres: number): string {
  const { triangles, deviation } = report.proxy;
  if (triangles >= report.triangles || !deviation) return '';
  const most = (deviation.max * millimetres).toPrecision(2);
  return `The picture shows ${writeCount(triangles)} of ${writeCount(report.triangles)} triangles; measured, it is at most ${Number(most)} mm off.`;
}

/** What to do about a mesh that nothing can be made of, one step a line. */
export const hopelessSteps: readonly string[] = [
  'Give the surface a thickness where the model was made, so that it encloses something.',
  'Export it again and upload it as a new revision.',
];

function counted(count: number, noun: string): string {
  return count === 1 ? `one ${noun}` : `${writeCount(count)} ${noun}s`;
}
