import type { MendingChoices } from '../../shared/jobs/mending-choices.js';
import type { Ask, SurfaceState } from '../../shared/jobs/model-inspect.js';
import { countOf } from '../intake/refusal-words.js';
import type { MendedModel } from './mend-to-solid.js';
import { shortNumber } from './short-number.js';

/** A change of the volume by more than this share has to be accepted. */
const largestVolumeShare = 0.005;
/** A change of a side of the box by more than this share of its diagonal: twice what welding may move. */
const largestBoxShare = 2e-5;

/**
 * What a person has to decide about a mended file. A surface that is no solid yet gives one question on
 * how to close it; a solid that differs from the file gives one on whether to take it.
 * @param before the file's surface, its volume as far as it has one
 * @param after the mended surface
 */
export function asksOf(
  mended: MendedModel,
  before: SurfaceState,
  after: SurfaceState,
  choices: MendingChoices,
): Ask[] {
  if (!mended.solid) {
    const open = mended.holes.filter((hole) => !hole.isFilled);
    if (mended.remeshRefusal !== null || open.length === 0)
      return [{ kind: 'remesh', sentence: mended.remeshRefusal ?? rebuildSentence(after) }];
    const longest = open.reduce((most, hole) => Math.max(most, hole.perimeter), 0);
    const sentence = `${countOf(open.length, 'hole')} ${open.length === 1 ? 'is' : 'are'} too large to be closed without asking. Choose up to which size holes are filled, or have the surface rebuilt.`;
    return [{ kind: 'fill-holes', sentence, count: open.length, longest }];
  }
  if (mended.solid.crossingRefusal !== null)
    return [{ kind: 'remesh', sentence: mended.solid.crossingRefusal }];
  const changes = changesOf(before, after);
  if (choices.remeshCells !== null)
    changes.unshift(
      'The surface was rebuilt on a grid, which rounds whatever is finer than a cell.',
    );
  if (changes.length === 0) return [];
  return [{ kind: 'accept', sentence: `${changes.join(' ')} Is this the shape you meant?` }];
}

/** Sentences on what mending changed beyond what it may change silently. */
function changesOf(before: SurfaceState, after: SurfaceState): string[] {
  const changes: string[] = [];
  const share = before.volume > 0 ? after.volume / before.volume - 1 : Infinity;
  if (Math.abs(share) > largestVolumeShare)
    changes.push(
      Number.isFinite(share)
        ? `Mending made the volume ${shortNumber(Math.abs(share) * 100)} % ${share > 0 ? 'larger' : 'smaller'}.`
        : 'The file encloses no volume of its own; mending gave it one.',
    );
  const allowed = largestBoxShare * Math.hypot(...before.size);
  const axes = ['x', 'y', 'z'].filter((_, axis) => {
    const low = Math.abs(after.min[axis] - before.min[axis]);
    const high = Math.abs(
      after.min[axis] + after.size[axis] - before.min[axis] - before.size[axis],
    );
    return Math.max(low, high) > allowed;
  });
  if (axes.length > 0) changes.push(`Mending changed the outer size along ${axes.join(', ')}.`);
  return changes;
}

function rebuildSentence({ openEdges, nonManifoldEdges, misorientedEdges }: SurfaceState): string {
  const left: string[] = [];
  if (openEdges > 0) left.push(`${countOf(openEdges, 'edge')} with a facet on one side only`);
  if (nonManifoldEdges > 0)
    left.push(`${countOf(nonManifoldEdges, 'edge')} shared by more than two facets`);
  if (misorientedEdges > 0)
    left.push(`${countOf(misorientedEdges, 'edge')} whose two facets face opposite ways`);
  return `Mending left ${left.join(', ')}. Rebuilding the surface on a grid closes it, at the price of details finer than a cell.`;
}
