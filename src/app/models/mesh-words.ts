import { type MeshReport } from '../../../shared/jobs/model-inspect.js';
import { writeBytes, writeCount } from '../ui/format/quantities';

/** What the file is, told as a colleague would after looking it through. */
export function meshInWords(report: MeshReport): string {
  const kind = report.format === 'stl-ascii' ? 'An STL written as text' : 'A binary STL';
  const file = `${kind} of ${writeBytes(report.fileBytes)} with ${counted(report.facetsRead, 'facet')}.`;
  if (!report.closed) {
    return `${file} Its surface is not closed, so it has no inside that could be cut.`;
  }
  const bodies = report.shells - report.cavities;
  const solids = bodies === 1 ? 'one closed solid' : `${writeCount(bodies)} closed solids`;
  const hollows = report.cavities > 0 ? ` with ${counted(report.cavities, 'hollow')} inside` : '';
  const turned = report.turnedOutward ? ' The file came inside out; it was turned.' : '';
  return `${file} It holds ${solids}${hollows}.${turned}`;
}

/** One row of the table of counts; `isBad` marks what keeps the model from being planned. */
export interface MeshCount {
  readonly name: string;
  readonly count: string;
  readonly isBad: boolean;
}

export function meshCounts(report: MeshReport): readonly MeshCount[] {
  const good = (name: string, count: number) => ({ name, count: writeCount(count), isBad: false });
  const bad = (name: string, count: number) => ({ ...good(name, count), isBad: count > 0 });
  return [
    good('Triangles', report.triangles),
    good('Vertices', report.vertices),
    good('Shells', report.shells),
    good('Hollows inside', report.cavities),
    bad('Open edges', report.openEdges),
    bad('Edges of more than two triangles', report.nonManifoldEdges),
    bad('Edges whose triangles disagree about the outside', report.misorientedEdges),
    good('Facets without area, left out', report.degenerateDropped),
    good('Facets given twice', report.duplicateFacets),
  ];
}

/** What to do about a mesh that cannot be planned, one step a line. */
export function nextSteps(report: MeshReport): readonly string[] {
  const steps: string[] = [];
  if (report.openEdges > 0) {
    steps.push(
      'Close the holes where the model was made, for example by giving thin surfaces a thickness.',
    );
  }
  if (report.nonManifoldEdges > 0 || report.duplicateFacets > 0) {
    steps.push('Join overlapping bodies into one, and remove faces that lie on top of each other.');
  }
  if (report.misorientedEdges > 0) {
    steps.push('Turn all faces outward; most modelling programs have a command for it.');
  }
  return [...steps, 'Export it as STL again and upload it as a new model.'];
}

function counted(count: number, noun: string): string {
  return count === 1 ? `one ${noun}` : `${writeCount(count)} ${noun}s`;
}
