import { type RevisionSummary } from '../../../../shared/api/models.contract.js';
import { writeCount } from '../../ui/format/quantities';
import { changeInWords } from '../mesh-words';

/** How a revision differs from the one before, as a sentence; empty while either is not inspected. */
export function comparisonInWords(now: RevisionSummary, before: RevisionSummary): string {
  if (!now.sizeMm || !before.sizeMm || now.triangles === null || before.triangles === null)
    return '';
  const size = ['x', 'y', 'z']
    .map((axis, i) => ({ axis, by: now.sizeMm![i]! - before.sizeMm![i]! }))
    .filter(({ by }) => Math.abs(by) >= 0.05)
    .map(({ axis, by }) => `${axis} ${by > 0 ? '+' : '−'}${Math.abs(by).toFixed(1)} mm`);
  const sides = size.length > 0 ? `size ${size.join(', ')}` : 'the same size';
  const volume =
    now.volumeMm3 && before.volumeMm3
      ? `, volume ${changeInWords(before.volumeMm3, now.volumeMm3)}`
      : '';
  const by = now.triangles - before.triangles;
  const triangles =
    by === 0
      ? 'as many triangles'
      : `${writeCount(Math.abs(by))} ${by > 0 ? 'more' : 'fewer'} triangles`;
  return `Against revision ${before.number}: ${sides}${volume}, ${triangles}.`;
}
